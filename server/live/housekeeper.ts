import type { Knex } from 'knex'
import { tidyUp } from '../services/housekeeping'
import type { Clock } from '../utils/clock'
import { Loop, type LiveLog } from './loop'

export interface HousekeeperOptions {
  db: Knex
  clock: Clock
  log: LiveLog
  /** Rest between two rounds in milliseconds; an hour unless said otherwise. */
  restMs?: number
}

/** Makes a round through what has grown old, at the start and every hour. */
export class Housekeeper {
  readonly #loop: Loop

  constructor({ db, clock, log, restMs = 3_600_000 }: HousekeeperOptions) {
    this.#loop = new Loop('housekeeping', async () => {
      const gone = await tidyUp(db, await clock.now(db))
      if (gone > 0) log.info({ gone }, 'old keys, sessions and limits were taken away')
      return restMs
    }, log)
  }

  start(): void {
    this.#loop.start()
  }

  stop(): Promise<void> {
    return this.#loop.stop()
  }
}
