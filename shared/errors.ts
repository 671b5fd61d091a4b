/**
 * The one table of stable error codes: code → HTTP status and short status message.
 * Screens and scripts rely on the codes; the sentence that goes with each is written where it is thrown.
 */
export const errorCodes = {
  invalid_input: [422, 'Invalid input'],
  malformed_body: [400, 'Malformed body'],
  unsupported_media: [415, 'Unsupported media type'],
  not_signed_in: [401, 'Not signed in'],
  wrong_credentials: [401, 'Wrong e-mail or password'],
  session_required: [403, 'Session required'],
  fresh_sign_in_required: [401, 'Fresh sign-in required'],
  foreign_origin: [403, 'Foreign origin'],
  role_too_low: [403, 'Not allowed'],
  account_required: [403, 'Account required'],
  class_over: [403, 'Class over'],
  class_full: [409, 'Class full'],
  registration_closed: [403, 'Registration closed'],
  link_void: [410, 'Link no longer works'],
  last_owner: [409, 'Last owner'],
  last_way_in: [409, 'Last way in'],
  passkey_refused: [401, 'Passkey refused'],
  openid_void: [410, 'Sign-in expired'],
  openid_refused: [401, 'Sign-in refused'],
  openid_unverified: [403, 'Address not verified'],
  openid_unreachable: [503, 'Provider unreachable'],
  passkeys_impossible: [409, 'Passkeys impossible here'],
  not_found: [404, 'Not found'],
  method_not_allowed: [405, 'Method not allowed'],
  id_taken: [409, 'Id taken'],
  email_taken: [409, 'E-mail taken'],
  stale_revision: [409, 'Stale revision'],
  combination_fixed: [409, 'Combination fixed'],
  wrong_state: [409, 'Wrong state'],
  wrong_offset: [409, 'Wrong offset'],
  upload_protocol: [412, 'Upload protocol'],
  studio_full: [413, 'Studio full'],
  body_too_large: [413, 'Body too large'],
  file_too_large: [413, 'File too large'],
  picture_too_large: [413, 'Picture too large'],
  not_an_image: [415, 'Not an image'],
  upload_mixed: [422, 'Upload mixed'],
  image_unreadable: [422, 'Image unreadable'],
  film_too_large: [422, 'Film too large'],
  no_starter_curve: [422, 'No starter curve'],
  no_curve: [422, 'No curve'],
  unparsable: [422, 'Unparsable'],
  too_few_levels: [422, 'Too few levels'],
  range_too_small: [422, 'Range too small'],
  levels_unrelated: [422, 'Levels unrelated'],
  wedge_not_found: [422, 'Wedge not found'],
  other_wedge: [409, 'Other wedge'],
  wedge_unknown: [422, 'Wedge unknown'],
  code_unreadable: [422, 'Code unreadable'],
  reading_unfit: [422, 'Reading unfit'],
  too_many_requests: [429, 'Too many requests'],
  disk_full: [507, 'Disk full'],
  file_missing: [503, 'File missing'],
  image_child_failed: [503, 'Picture work failed'],
  unavailable: [503, 'Unavailable'],
  internal: [500, 'Internal error'],
} as const satisfies Record<string, readonly [number, string]>

export type ErrorCode = keyof typeof errorCodes

export interface Issue { path: string, message: string }

/**
 * What pure code and services throw. One mapper makes the HTTP answer of it.
 * `message` is a sentence that tells a person what happened and how to go on.
 */
export class ComputeError extends Error {
  constructor(readonly code: ErrorCode, message: string, readonly issues?: Issue[]) {
    super(message)
    this.name = 'ComputeError'
  }
}
