import type { Knex } from 'knex'
import { findDue, nextDue } from '../repositories/due-timers'
import { settleDue } from '../services/due-timers'
import type { Clock } from '../utils/clock'
import { movableClock } from '../utils/clock'
import type { Wake } from '../utils/context'
import { newId } from '../utils/ids'
import { Loop, type LiveLog } from './loop'

export interface SchedulerOptions {
  db: Knex
  clock: Clock
  log: LiveLog
  wake: Wake
  /** Longest rest in milliseconds; timers set by other processes are found after it. */
  longestRestMs?: number
}

const page = 50

/** A timer that another process holds is looked at again after this long. */
const heldRestMs = 50

/**
 * Finds due timers by the database's clock and settles them. Any number of processes may run one: each timer fires
 * once. What came due while nothing ran is caught up at the start.
 */
export class Scheduler {
  readonly #options: SchedulerOptions
  readonly #longestRestMs: number
  readonly #loop: Loop

  constructor(options: SchedulerOptions) {
    this.#options = options
    this.#longestRestMs = options.longestRestMs ?? (options.clock === movableClock ? 400 : 1_000)
    this.#loop = new Loop('timers', () => this.#turn(), options.log)
  }

  start(): void {
    this.#loop.start()
  }

  stop(): Promise<void> {
    return this.#loop.stop()
  }

  async #turn(): Promise<number> {
    const { db, clock, log } = this.#options
    const now = await clock.now(db)
    const due = await findDue(now, page, db)
    let settled = 0
    let failure: unknown
    for (const work of due) {
      if (this.#loop.stopped) return 0
      try {
        if (await settleDue(this.#context(), work)) settled++
      } catch (error) {
        // One timer that cannot be settled must not keep the others from ringing.
        log.error({ err: error, timer: work.id, action: work.action }, 'a timer could not be settled')
        failure = error
      }
    }
    if (failure !== undefined) throw failure
    const next = await nextDue(db)
    if (next === null) return this.#longestRestMs
    const least = due.length > settled ? heldRestMs : 0
    return Math.min(Math.max(next - now, least), this.#longestRestMs)
  }

  #context() {
    const { db, clock, wake } = this.#options
    return { db, clock, wake, principal: { kind: 'system', user: null, device: null } as const, requestId: newId() }
  }
}
