import type { RouteCase } from './route-case'

export const openIdCases: RouteCase[] = [
  {
    file: 'auth/openid/start.post.ts', row: 'openIdStart', good: () => ({ json: { next: '/account' } }),
    bad: [{ why: 'a page elsewhere to go on to', call: () => ({ json: { next: '//elsewhere.example' }, status: 422, code: 'invalid_input' }) }],
  },
  // Whatever comes, the answer is a page of ours.
  { file: 'auth/openid/back.get.ts', row: 'openIdBack', good: () => ({ status: 302 }) },
  { file: 'auth/sign-in-again/openid.post.ts', row: 'openIdAgain', good: () => ({ json: { next: '/account' } }) },
]
