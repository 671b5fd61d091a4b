import type { Role } from '#shared/schemas/people'
import type { LetterContent } from './letter'

// The words of each letter. Names are what people typed; the composer escapes them.

const unasked = 'If you did not ask for this, you need not do anything.'
const rolePhrase: Record<Role, string> = { owner: 'an owner', technician: 'a technician', member: 'a member' }

export const invitationLetter = ({ studioName, invitedBy, role, url, days }: { studioName: string, invitedBy: string, role: Role, url: string, days: number }): LetterContent => ({
  subject: `${invitedBy} invites you to ${studioName}`,
  paragraphs: [`${invitedBy} invites you to join ${studioName} on Emulside as ${rolePhrase[role]}.`, `The link works for ${days} days.`],
  action: { label: 'Look at the invitation', url },
  footer: `This letter went to you because ${invitedBy} entered your address. ${unasked}`,
})

export const resetLetter = ({ url, minutes }: { url: string, minutes: number }): LetterContent => ({
  subject: 'Set a new password',
  paragraphs: ['Somebody asked for a new password for your Emulside account, most likely you.', `The link works once, for ${minutes} minutes. Wherever you are signed in now, you will be signed out.`],
  action: { label: 'Set a new password', url },
  footer: `${unasked} Your password stays as it is.`,
})

export const confirmAddressLetter = ({ url, minutes }: { url: string, minutes: number }): LetterContent => ({
  subject: 'Confirm your new address',
  paragraphs: ['This address is to become the one of your Emulside account.', `The link works once, for ${minutes} minutes.`],
  action: { label: 'Confirm the address', url },
  footer: unasked,
})

export const addressChangedLetter = ({ to }: { to: string }): LetterContent => ({
  subject: 'The address of your account has changed',
  paragraphs: [`Your Emulside account now belongs to ${to}; letters go there from now on.`],
  footer: 'If this was not you, tell the owner of your studio at once.',
})

export const passwordChangedLetter = (): LetterContent => ({
  subject: 'Your password has changed',
  paragraphs: ['The password of your Emulside account was changed just now, and you were signed out elsewhere.'],
  footer: 'If this was not you, ask for a new password on the sign-in page at once.',
})

export const passkeyAddedLetter = ({ name }: { name: string }): LetterContent => ({
  subject: 'A passkey was added to your account',
  paragraphs: [`The passkey “${name}” was added to your Emulside account just now. Whoever holds it can sign in.`],
  footer: 'If this was not you, sign in, remove the passkey in your account, and set a new password at once.',
})

export const passkeyRemovedLetter = ({ name }: { name: string }): LetterContent => ({
  subject: 'A passkey was removed from your account',
  paragraphs: [`The passkey “${name}” was removed from your Emulside account just now, and no longer signs in.`],
  footer: 'If this was not you, sign in and set a new password at once.',
})

export const identityLinkedLetter = ({ provider }: { provider: string }): LetterContent => ({
  subject: `Your account opens with ${provider}`,
  paragraphs: [`Somebody signed in with ${provider} under this address, most likely you. From now on ${provider} opens your Emulside account, beside the ways it had before.`],
  footer: 'If this was not you, or you never made this account yourself, set a new password on the sign-in page; that signs everybody else out.',
})

export const accountErasureLetter = ({ on, url }: { on: string, url: string }): LetterContent => ({
  subject: 'Your account will be erased',
  paragraphs: [`Your account, your photos and your negatives will be erased on ${on}. Until then you can sign in and keep them.`],
  action: { label: 'Keep my account', url },
  footer: 'This letter went to you because the erasure was asked for while you were signed in.',
})

export const studioErasureLetter = ({ studioName, on, by }: { studioName: string, on: string, by: string }): LetterContent => ({
  subject: `${studioName} will be erased`,
  paragraphs: [`${by} has asked for ${studioName} to be erased, with everything in it. That will happen on ${on}; until then an owner can keep it.`, 'Take along what you need: original photos and film files can be downloaded until that day.'],
  footer: 'This letter went to everybody in the studio.',
})

export const roleChangedLetter = ({ studioName, role }: { studioName: string, role: Role }): LetterContent => ({
  subject: `Your role in ${studioName}`,
  paragraphs: [`You are now ${rolePhrase[role]} of ${studioName}.`],
  footer: 'You can switch these notices off in your account.',
})

export const testLetter = ({ studioName }: { studioName: string }): LetterContent => ({
  subject: 'Mail works',
  paragraphs: [`This is the test letter that you sent yourself from ${studioName}. Letters leave this installation and arrive.`],
  footer: 'Nothing needs to be done.',
})
