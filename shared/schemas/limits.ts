/** Bounds that tables, forms and schemas share. */
export const limits = {
  nameLength: 120,
  /** one line of a record */
  lineLength: 200,
  firstNameLength: 40,
  /** in one class */
  studentsMax: 200,
  /** how far ahead a class may end */
  classMaxDays: 400,
  textLength: 2000,
  emailLength: 254,
  passwordMinLength: 10,
  passwordMaxLength: 200,
  passkeysPerPerson: 20,
  /** characters of a credential's id, base64url: 1023 bytes at most (WebAuthn Level 2, 4) */
  credentialIdLength: 1364,
  /** mm; the least and the greatest side of a print or a page */
  sideMinMm: 5,
  sideMaxMm: 1500,
  marginMaxMm: 60,
  pixelsPerInchMin: 72,
  pixelsPerInchMax: 1440,
  filmMaxPixels: 200_000_000,
  fileNameLength: 255,
  fileMaxBytes: 1_000_000_000,
  /** pictures in one upload */
  uploadMaxFiles: 100,
  /** a person’s uploads that are not finished, in a studio */
  openUploads: 100,
  pageMax: 100,
} as const
