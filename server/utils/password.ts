import { randomBytes } from 'node:crypto'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { Refusal } from './errors'
import { Gate } from './gate'

/** 32 MiB and about 0.1 s a hash; Node refuses this cost without the higher `maxMemory`. */
const scrypt = new Scrypt({ cost: 32768, blockSize: 8, parallelization: 3, maxMemory: 67108864 })

/** More at once would take the memory and the cores that running pots need. */
const gate = new Gate(2, {
  // A flood of sign-ins is turned away instead of keeping everybody waiting for minutes.
  most: 40,
  full: () => new Refusal(503, 'busy', 'Too many people sign in at once. Try again in a moment.', [], { retryAfterS: 5 }),
})

/** One hash of a password that nobody has, for `verifyNobody`. */
let nobody: Promise<string> | null = null

/** Hashes a password or PIN with a salt of its own, in PHC form. */
export function hashSecret(password: string): Promise<string> {
  return gate.run(() => scrypt.make(password))
}

/**
 * Whether the password is the one that was hashed. A hash that is not scrypt's fits no password.
 * @param hash in PHC form, as `hashSecret` gave it
 */
export function verifySecret(hash: string, password: string): Promise<boolean> {
  return gate.run(async () => scrypt.isValidHash(hash) && scrypt.verify(hash, password))
}

/** Spends what checking a password costs and says no, so that the time of an answer does not tell who is known. */
export async function verifyNobody(password: string): Promise<false> {
  nobody ??= hashSecret(randomBytes(32).toString('base64'))
  await verifySecret(await nobody, password)
  return false
}

/** True when a hash was made with other costs than today's: hash the password anew at the next sign-in. */
export function needsRehash(hash: string): boolean {
  return !scrypt.isValidHash(hash) || scrypt.needsReHash(hash)
}
