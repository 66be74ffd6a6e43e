import type { Logger } from 'pino'

/** What the background work of a process writes about itself. */
export type LiveLog = Pick<Logger, 'error' | 'warn' | 'info'>

const firstPauseMs = 100
const longestPauseMs = 5_000

/**
 * Does a piece of work over and over: after the pause that it asks for, or sooner when woken. What it throws is
 * logged once a failure, and it goes on with growing pauses.
 */
export class Loop {
  #stopped = false
  #woken = false
  #endPause: (() => void) | null = null
  #running: Promise<void> | null = null

  /** @param work one turn; returns how long to rest in milliseconds */
  constructor(readonly name: string, readonly work: () => Promise<number>, readonly log: LiveLog) {}

  get stopped(): boolean {
    return this.#stopped
  }

  start(): void {
    this.#running ??= this.#run()
  }

  /** Ends the pause, or skips the next one when the work is under way. */
  wake(): void {
    this.#woken = true
    this.#endPause?.()
  }

  /** Resolves when the turn under way has ended and no other will begin. */
  async stop(): Promise<void> {
    this.#stopped = true
    this.#endPause?.()
    await this.#running
  }

  async #run(): Promise<void> {
    let failures = 0
    while (!this.#stopped) {
      this.#woken = false
      try {
        const restMs = await this.work()
        failures = 0
        if (!this.#woken) await this.#pause(restMs)
      } catch (error) {
        this.log.error({ err: error, loop: this.name, failures: ++failures }, 'a turn failed; it is tried again')
        await this.#pause(Math.min(firstPauseMs * 2 ** (failures - 1), longestPauseMs))
      }
    }
  }

  #pause(ms: number): Promise<void> {
    if (this.#stopped) return Promise.resolve()
    return new Promise((resolve) => {
      const timer = setTimeout(() => this.#endPause?.(), ms)
      this.#endPause = () => {
        clearTimeout(timer)
        this.#endPause = null
        resolve()
      }
    })
  }
}
