import { createHash, randomBytes } from 'node:crypto'

/** 32 random bytes for a letter's link or a token; only the hash is kept. */
export function newSecret(prefix = ''): { secret: string, hash: string } {
  const secret = `${prefix}${randomBytes(32).toString('base64url')}`
  return { secret, hash: hashOfSecret(secret) }
}

/** Secrets of 256 random bits need no slow hash. */
export const hashOfSecret = (secret: string): string => createHash('sha256').update(secret).digest('hex')
