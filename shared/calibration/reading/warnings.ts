/** What a reading may have to say. `stop` means that no patch was read. */
export interface ReadingWarning { code: ReadingWarningCode, severity: 'stop' | 'caution', message: string }

const sentences = {
  not_found: ['stop', 'The wedge was not found in this picture. Lay the whole print flat, light it evenly, and scan or photograph it again with all four corners in view; or drag the four corners to the markers by hand.'],
  cropped: ['caution', 'Part of the wedge lies outside the picture; those patches could not be read. Scan again with some paper around the wedge.'],
  too_small: ['caution', 'The wedge has few pixels here. Scan at 300 pixels per inch, or go nearer with the phone.'],
  blurred: ['caution', 'The edges are soft. Press the print flat on the glass, clean the lens, or hold the phone still; if the scan is sharp, film and paper did not touch well in the frame.'],
  clipped_light: ['caution', 'The paper white is cut off at the lightest value. Turn automatic exposure off, or lower the exposure, and scan again.'],
  clipped_dark: ['caution', 'The deepest tone is cut off at the darkest value. Turn automatic levels off and scan again.'],
  auto_levelled: ['caution', 'The tones of this file have been stretched after the scan. Turn automatic levels and sharpening off and scan again.'],
  mirrored: ['caution', 'The print reads mirror-reversed: the film was exposed wrong side up (printed side away from the paper), or the picture was flipped. Patches were read, but tones through the film’s thickness are softer than your negatives will be.'],
  inverted: ['caution', 'Light and dark are exchanged in this picture. Scan as a positive, reflective original; the values below are only a guess.'],
  film_itself: ['caution', 'This looks like the film and not the print: mirror-reversed, with light and dark exchanged. Lay the film on the paper, expose, and scan the print.'],
  few_markers: ['caution', 'Some of the markers could not be seen, so the paper’s own waves are corrected less well there. Look whether the drawn cells lie on the patches.'],
  other_wedge: ['caution', 'The tones do not follow this wedge’s levels. This may be the print of another wedge: compare the code beside the patches.'],
  spots: ['caution', 'There is much dust, hair or spotting on some patches; those pixels were left out.'],
  uneven_light: ['caution', 'The light is uneven across this picture. It was evened out from the white and black places beside the markers, less well than even light would have been.'],
  phone: ['caution', 'Read from a phone picture: phones change tones from place to place. A flatbed scan reads more truly, and the two are not pooled.'],
  weak_contrast: ['caution', 'White and black places differ little. Check the exposure and the washing before building a curve on this print.'],
} as const satisfies Record<string, readonly ['stop' | 'caution', string]>

export type ReadingWarningCode = keyof typeof sentences

/** A warning with its sentence; `detail` is put behind it. */
export function readingWarning(code: ReadingWarningCode, detail?: string): ReadingWarning {
  const [severity, sentence] = sentences[code]
  return { code, severity, message: detail ? `${sentence} ${detail}` : sentence }
}
