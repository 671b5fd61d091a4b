import type { z } from 'zod'

/**
 * Who may call: `public`; `session` (any signed-in person); `fresh-session` (signed in within ten minutes);
 * or the least role in the studio that the path names.
 */
export type Access = 'public' | 'session' | 'fresh-session' | 'member' | 'technician' | 'owner'

/** An answer's body by status: a schema, or the media types of a file that is streamed, or null for none. */
export type AnswerShape = z.ZodType | readonly string[] | null

export interface Endpoint {
  method: 'GET' | 'HEAD' | 'OPTIONS' | 'POST' | 'PATCH' | 'PUT' | 'DELETE'
  path: `/api${string}`
  access: Access
  /** `session`: a bearer token does not do */
  only?: 'session'
  /** beside a role: a session whose person signed in within ten minutes */
  fresh?: true
  /** takes an account with an address: not for students of a class */
  account?: true
  /** works for students whose class is over, though it is no GET: it makes nothing new of theirs */
  afterClass?: true
  summary: string
  query?: z.ZodType
  /** JSON body */
  body?: z.ZodType
  /** other bodies, by media type: what the part or the text holds */
  otherBodies?: Record<string, string>
  answers: Record<number, AnswerShape>
}

/** Keeps the literal types of one row of the contract. */
export const endpoint = <const E extends Endpoint>(row: E): E => row

/** What a streamed file answers beside 200: a part of it, known already, or a range that it does not have. */
export const streamed = (mediaTypes: readonly string[]) => ({ 206: mediaTypes, 304: null, 416: null })
