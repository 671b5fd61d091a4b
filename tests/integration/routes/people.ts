import { randomUUID } from 'node:crypto'
import type { RouteCase } from './route-case'

const newcomer = () => ({ name: 'Otto Lind', email: `${randomUUID()}@ropeworks.example`, password: 'a long enough one' })

export const peopleCases: RouteCase[] = [
  {
    file: 'auth/register.post.ts', row: 'register', good: () => ({ json: newcomer(), status: 201 }),
    bad: [
      { why: 'a short password', call: () => ({ json: { ...newcomer(), password: 'short' }, status: 422, code: 'invalid_input' }) },
      { why: 'no e-mail address', call: () => ({ json: { ...newcomer(), email: 'rope' }, status: 422, code: 'invalid_input' }) },
      { why: 'an address that is taken', call: ({ owner }) => ({ json: { ...newcomer(), email: owner.email.toUpperCase() }, status: 409, code: 'email_taken' }) },
      { why: 'a name of 10 000 characters', call: () => ({ json: { ...newcomer(), name: 'n'.repeat(10_000) }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'auth/login.post.ts', row: 'login', good: ({ owner }) => ({ json: { email: owner.email, password: owner.password } }),
    bad: [
      { why: 'a wrong password', call: ({ owner }) => ({ json: { email: owner.email, password: 'not the one' }, status: 401, code: 'wrong_credentials' }) },
      { why: 'an unknown address', call: () => ({ json: { email: newcomer().email, password: 'not the one' }, status: 401, code: 'wrong_credentials' }) },
    ],
  },
  { file: 'auth/logout.post.ts', row: 'logout', good: () => ({ status: 204 }) },
  { file: 'me.get.ts', row: 'me', good: () => ({}) },
  {
    file: 'studios/index.post.ts', row: 'createStudio', good: () => ({ json: { name: 'Second floor' }, status: 201 }),
    bad: [{ why: 'an empty name', call: () => ({ json: { name: '  ' }, status: 422, code: 'invalid_input' }) }],
  },
  { file: 'studios/[studio]/index.get.ts', row: 'studio', good: () => ({}) },
  { file: 'studios/[studio]/people.get.ts', row: 'people', good: () => ({}) },
  { file: 'studios/[studio]/events.get.ts', row: 'events', good: () => ({}), endless: true },
]
