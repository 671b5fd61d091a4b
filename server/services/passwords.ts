import { Scrypt } from '@adonisjs/hash/drivers/scrypt'

// N = 2^15, r = 8, p = 3: OWASP's password storage cheat sheet names it equal to N = 2^17, p = 1, at a quarter of the memory.
const scrypt = new Scrypt({ cost: 2 ** 15, blockSize: 8, parallelization: 3, maxMemory: 64 * 1024 * 1024 })

export const hashPassword = (password: string): Promise<string> => scrypt.make(password)

let anyHash: Promise<string> | undefined

/** False for a person who is unknown or has no password, after the same work as for a known one: the time tells nothing. */
export async function passwordMatches(hash: string | null | undefined, password: string): Promise<boolean> {
  const decoy = await (anyHash ??= hashPassword(crypto.randomUUID()))
  const matches = await scrypt.verify(hash ?? decoy, password)
  return matches && hash != null
}
