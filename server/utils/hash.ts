import { createHash, randomBytes } from 'node:crypto'

/** SHA-256 of the parts, one after the other, in lower-case hexadecimal. */
export function sha256(...parts: string[]): string {
  const digest = createHash('sha256')
  for (const part of parts) digest.update(part, 'utf8')
  return digest.digest('hex')
}

/** A random value of 256 bits for cookies, in hexadecimal. */
export const randomToken = (): string => randomBytes(32).toString('hex')
