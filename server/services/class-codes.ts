import { randomInt, scrypt } from 'node:crypto'
import { promisify } from 'node:util'
import { codeAlphabet, personalCodeLength, roomCodeLength } from '#shared/classes/codes'

const newCode = (length: number) => Array.from({ length }, () => codeAlphabet[randomInt(codeAlphabet.length)]).join('')

export const newRoomCode = (): string => newCode(roomCodeLength)

const slowHash = promisify(scrypt) as (text: string, salt: string, bytes: number) => Promise<Buffer>

/**
 * Of a personal code, found again by this alone: nobody types a name beside it, so every code has the same salt. 50 random
 * bits are too few for a quick hash in stolen hands; scrypt at Node's default cost (N = 2^14) makes each try some 50 ms.
 */
export const hashOfPersonalCode = async (code: string): Promise<string> => (await slowHash(code, 'emulside personal code', 32)).toString('hex')

export async function newPersonalCode(): Promise<{ code: string, hash: string }> {
  const code = newCode(personalCodeLength)
  return { code, hash: await hashOfPersonalCode(code) }
}
