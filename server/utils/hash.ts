import { createHash, createHmac, randomBytes } from 'node:crypto'

/** SHA-256 of the parts, one after the other, in lower-case hexadecimal. */
export function sha256(...parts: string[]): string {
  const digest = createHash('sha256')
  for (const part of parts) digest.update(part, 'utf8')
  return digest.digest('hex')
}

/** HMAC-SHA-256 of the text in lower-case hexadecimal: nobody without the secret can make it or guess the text by it. */
export const keyedHash = (secret: string, text: string): string => createHmac('sha256', secret).update(text, 'utf8').digest('hex')

/** A random value of 256 bits for cookies, in hexadecimal. */
export const randomToken = (): string => randomBytes(32).toString('hex')
