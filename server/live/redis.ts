import { Redis } from 'ioredis'
import type { EventHub } from './hub'
import type { LiveLog } from './loop'

const channel = 'potbell:committed'

/**
 * Wakes the pumps of other processes after a commit, and ours after theirs. Without Redis the poll of the pump
 * does the same, a little later; so a lost connection is logged once and nothing else stops.
 */
export class RedisWake {
  readonly #publisher: Redis
  readonly #subscriber: Redis
  readonly #forget: () => void
  #lost = false

  constructor(url: string, hub: EventHub, wakePump: () => void, readonly log: LiveLog) {
    this.#publisher = this.#connect(url)
    this.#subscriber = this.#connect(url)
    this.#subscriber.on('ready', () => {
      this.#subscriber.subscribe(channel).then(wakePump, (error: unknown) => this.#reportLost(error))
    })
    this.#subscriber.on('message', wakePump)
    this.#forget = hub.onWake((seq) => this.#publish(seq))
  }

  /** Closes both connections at once. */
  close(): void {
    this.#forget()
    this.#publisher.disconnect()
    this.#subscriber.disconnect()
  }

  #connect(url: string): Redis {
    const redis = new Redis(url, {
      enableOfflineQueue: false,
      autoResubscribe: false,
      connectTimeout: 5_000,
      retryStrategy: (times) => Math.min(200 * times, 5_000),
    })
    redis.on('error', (error: unknown) => this.#reportLost(error))
    redis.on('ready', () => {
      if (this.#lost) this.log.info('Redis is back')
      this.#lost = false
    })
    return redis
  }

  #publish(seq: number): void {
    if (this.#publisher.status !== 'ready') return
    this.#publisher.publish(channel, String(seq)).catch((error: unknown) => this.#reportLost(error))
  }

  #reportLost(error: unknown): void {
    if (this.#lost) return
    this.#lost = true
    this.log.warn({ err: error }, 'Redis is lost; other processes are heard by polling until it is back')
  }
}
