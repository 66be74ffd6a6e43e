import type { SourceClock } from '#shared/utils/bench-scale'

/** A clock that stands until a test moves it; what was asked for then happens in its order. */
export class HeldClock implements SourceClock {
  #now = 0
  #due: { at: number, call: () => void }[] = []

  now = (): number => this.#now

  after = (ms: number, call: () => void): (() => void) => {
    const entry = { at: this.#now + ms, call }
    this.#due.push(entry)
    return () => {
      this.#due = this.#due.filter(other => other !== entry)
    }
  }

  pass(ms: number): void {
    const until = this.#now + ms
    for (let next = this.#earliest(until); next; next = this.#earliest(until)) {
      this.#due = this.#due.filter(other => other !== next)
      this.#now = next.at
      next.call()
    }
    this.#now = until
  }

  #earliest(until: number): { at: number, call: () => void } | undefined {
    return this.#due.filter(({ at }) => at <= until).sort((a, b) => a.at - b.at)[0]
  }
}
