/**
 * The engine's version, part of each render key: whatever can change a film file's bytes changes this.
 * Raise the first number with any change of pixels or bytes; a test holds the rest to the installed sharp.
 */
export const engineVersion = 'engine-2 sharp-0.35.5 libvips-8.18.7'
