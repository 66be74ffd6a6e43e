const HEX = Array.from({ length: 256 }, (_, byte) => byte.toString(16).padStart(2, '0'))

/**
 * A random UUID (version 4, RFC 9562). On a plain-http address of the shop's own network browsers have no
 * `crypto.randomUUID`; the random bytes themselves are there everywhere.
 */
export function newUuid(): string {
  if (typeof crypto.randomUUID === 'function') return crypto.randomUUID()
  const bytes = crypto.getRandomValues(new Uint8Array(16))
  bytes[6] = ((bytes[6] ?? 0) & 0x0F) | 0x40
  bytes[8] = ((bytes[8] ?? 0) & 0x3F) | 0x80
  const hex = Array.from(bytes, byte => HEX[byte]).join('')
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-')
}
