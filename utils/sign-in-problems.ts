import type { ErrorCode } from '#shared/errors'

interface SignInProblem { title: string, sentence: string }

/** Why somebody came back from the provider without being signed in, and how to go on. The address names a code only. */
const problems: Partial<Record<ErrorCode, SignInProblem>> = {
  openid_void: { title: 'That took too long', sentence: 'The sign-in took longer than ten minutes, was used already, or was begun in another browser. Start it again.' },
  openid_refused: { title: 'Not signed in', sentence: 'The sign-in was broken off, not allowed, or did not belong to what was asked. Try again, or sign in another way.' },
  openid_unverified: { title: 'Your address is not confirmed', sentence: 'The provider has not confirmed that the e-mail address is yours. Have it confirmed there, or sign in another way.' },
  openid_unreachable: { title: 'The provider does not answer', sentence: 'Try again later. Other ways of signing in work all the same.' },
  registration_closed: { title: 'By invitation only', sentence: 'You have no account here, and this installation takes new people by invitation. Ask an owner of a studio to invite you; the letter’s link lets you in.' },
  link_void: { title: 'The invitation no longer works', sentence: 'It was used, taken back, or is older than two weeks. Ask for a new one.' },
  too_many_requests: { title: 'Too many attempts', sentence: 'Wait fifteen minutes, then try again.' },
}

export function signInProblem(code: unknown): SignInProblem {
  return problems[code as ErrorCode] ?? { title: 'Not signed in', sentence: 'Something went wrong on our side. Try again in a moment.' }
}
