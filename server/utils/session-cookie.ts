import { getCookie, type H3Event } from 'h3'
import { z } from 'zod'
import { readSettings } from '../config'

const cookieName = 'emulside'
const cookieSettings = () => ({ cookie: { sameSite: 'lax' as const, httpOnly: true, path: '/', secure: readSettings().NUXT_PUBLIC_URL?.startsWith('https:') ?? false } })

/** The session id that the sealed cookie holds; it holds nothing else. Without a cookie none is made. */
export async function sessionIdOf(event: H3Event): Promise<string | undefined> {
  if (!getCookie(event, cookieName)) return undefined
  const { secure } = await getUserSession(event)
  return z.uuid().safeParse(secure?.sessionId).data
}

export async function keepSession(event: H3Event, sessionId: string): Promise<void> {
  await replaceUserSession(event, { secure: { sessionId } }, cookieSettings())
}

export async function dropSession(event: H3Event): Promise<void> {
  await clearUserSession(event, cookieSettings())
}

declare module '#auth-utils' {
  interface SecureSessionData { sessionId?: string }
}
