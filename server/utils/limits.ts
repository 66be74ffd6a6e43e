import type { Knex } from 'knex'
import { RateLimiterMemory, RateLimiterMySQL, RateLimiterRes } from 'rate-limiter-flexible'
import { Refusal } from './errors'
import { sha256 } from './hash'

/** Wrong passwords that an account may have in one window. */
const signInAttempts = 10
const windowS = 15 * 60

/** Requests a second that one session or device may send. */
const requestsPerSecond = 100

interface SignInLimit {
  /** Counts one try, before the password is looked at, so that tries sent at once cannot slip through. */
  consume(): Promise<void>
  /** Forgets the count after a right password. */
  clear(): Promise<void>
}

/**
 * Counts wrong passwords in the database, by account and by enrolled device and never by address, so that the
 * count survives a restart and a changed address gains nothing. Keys hold a hash, not the e-mail address.
 *
 * @throws Refusal 429 from `consume`, with the seconds to wait
 */
export function signInLimit(db: Knex, email: string, deviceId: string | null): SignInLimit {
  const limiter = new RateLimiterMySQL({
    storeClient: db,
    storeType: 'knex',
    dbName: db.client.config.connection.database as string,
    tableName: 'sign_in_limits',
    tableCreated: true,
    clearExpiredByTimeout: false,
    keyPrefix: 'sign-in',
    points: signInAttempts,
    duration: windowS,
  })
  const keys = [`account:${sha256(email)}`, ...(deviceId ? [`device:${deviceId}`] : [])]
  return {
    async consume() {
      for (const key of keys) await consume(limiter, key, 'Too many tries. Wait a little, then try again.')
    },
    async clear() {
      for (const key of keys) await limiter.delete(key)
    },
  }
}

const requests = new RateLimiterMemory({ points: requestsPerSecond, duration: 1, keyPrefix: 'requests' })

/** @throws Refusal 429 above 100 requests a second */
export const countRequest = (sessionOrDevice: string): Promise<void> => consume(requests, sessionOrDevice, 'Too many requests at once.')

async function consume(limiter: RateLimiterMySQL | RateLimiterMemory, key: string, message: string): Promise<void> {
  try {
    await limiter.consume(key)
  } catch (error) {
    if (!(error instanceof RateLimiterRes)) throw error
    const retryAfterS = Math.ceil(error.msBeforeNext / 1000)
    throw new Refusal(429, 'too-many-tries', message, [], { retryAfterS })
  }
}
