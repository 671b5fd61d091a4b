/** Kinds of letters. A person may switch off those that nobody asked for at that moment. */
export const letterKinds = ['invitation', 'password-reset', 'email-change', 'account-notice', 'studio-notice', 'test'] as const
export type LetterKind = typeof letterKinds[number]

/** `account-notice`: password, address or sign-ins have changed. `studio-notice`: roles, members, erasure of a studio. */
export const switchableLetters = ['account-notice', 'studio-notice'] as const satisfies readonly LetterKind[]
export type SwitchableLetter = typeof switchableLetters[number]
