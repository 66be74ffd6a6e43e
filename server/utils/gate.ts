/** Lets only so many through at once; the others wait in the order in which they came. */
export class Gate {
  #free: number
  readonly #waiting: (() => void)[] = []
  readonly #most: number
  readonly #full: () => Error

  /**
   * @param width how many may run at once, at least 1
   * @param options.most how many may wait; without it, as many as come
   * @param options.full what the next one gets when so many wait already
   */
  constructor(width: number, { most = Infinity, full = () => new Error('too many are waiting') }: { most?: number; full?: () => Error } = {}) {
    if (!Number.isSafeInteger(width) || width < 1) throw new RangeError('a gate needs a width of at least 1')
    this.#free = width
    this.#most = most
    this.#full = full
  }

  /** Runs `work` when there is room, and makes room again whether it succeeds or fails. */
  async run<T>(work: () => Promise<T>): Promise<T> {
    await this.#enter()
    try {
      return await work()
    } finally {
      this.#leave()
    }
  }

  #enter(): Promise<void> {
    if (this.#free > 0) {
      this.#free--
      return Promise.resolve()
    }
    if (this.#waiting.length >= this.#most) return Promise.reject(this.#full())
    return new Promise((resolve) => this.#waiting.push(resolve))
  }

  #leave(): void {
    const next = this.#waiting.shift()
    if (next) next()
    else this.#free++
  }
}
