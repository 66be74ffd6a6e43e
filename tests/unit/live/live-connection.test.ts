import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { backoffMs, longestWaitMs } from '#shared/utils/backoff'
import { LiveConnection, silenceMs, type Source } from '~/utils/live-connection'

/** A stream whose network is the test. */
class TestSource implements Source {
  readonly listeners = new Map<string, (event: { data?: string }) => void>()
  closed = false

  addEventListener(type: string, listener: (event: { data?: string }) => void): void {
    this.listeners.set(type, listener)
  }

  close(): void {
    this.closed = true
  }

  say(type: string, data?: string): void {
    this.listeners.get(type)?.({ data })
  }
}

function connect({ fails = 0 } = {}) {
  const sources: TestSource[] = []
  const heard: string[] = []
  let loads = 0
  let stale = 0
  const failures: unknown[] = []
  const server = { fails }
  const connection = new LiveConnection({
    load: async () => {
      loads++
      if (server.fails > 0) {
        server.fails--
        throw new Error('not there')
      }
    },
    open: () => {
      const source = new TestSource()
      sources.push(source)
      return source
    },
    onEvent: (data) => heard.push(`event ${data}`),
    onBeat: (data) => heard.push(`beat ${data}`),
    onStale: () => { stale++ },
    onFailure: (error) => failures.push(error),
    random: () => 1,
  })
  connection.connect()
  return { connection, sources, heard, failures, server, last: () => sources.at(-1)!, loads: () => loads, stale: () => stale }
}

const settle = () => vi.advanceTimersByTimeAsync(0)

beforeEach(() => { vi.useFakeTimers() })
afterEach(() => { vi.useRealTimers() })

describe('a live connection', () => {
  it('loads before it opens, so that the stream goes on from what was loaded', async () => {
    const { sources, loads } = connect()
    expect(sources).toHaveLength(0)
    await settle()
    expect([loads(), sources.length]).toEqual([1, 1])
  })

  it('loads and opens again after a break, and hears nothing from the broken stream any more', async () => {
    const { sources, heard, loads, stale, last } = connect()
    await settle()
    last().say('beat', '1')
    last().say('error')
    expect(sources[0]?.closed).toBe(true)
    sources[0]?.say('message', 'late')
    await vi.advanceTimersByTimeAsync(backoffMs(1, 1))
    expect([loads(), sources.length, stale()]).toEqual([2, 2, 0])
    last().say('message', '2')
    expect(heard).toEqual(['beat 1', 'event 2'])
  })

  it('says that it is stale at the second failure and goes on trying for good', async () => {
    const { stale, loads, failures, server, sources } = connect({ fails: 500 })
    await settle()
    expect(stale()).toBe(0)
    await vi.advanceTimersByTimeAsync(backoffMs(1, 1))
    expect(stale()).toBe(1)
    await vi.advanceTimersByTimeAsync(30 * 60_000)
    expect(loads()).toBeGreaterThan(300)
    expect(failures).toHaveLength(loads())
    server.fails = 0
    await vi.advanceTimersByTimeAsync(longestWaitMs)
    expect(sources).toHaveLength(1)
  })

  it('takes silence for a break, and a word for life', async () => {
    const { stale, last, sources } = connect()
    await settle()
    last().say('beat', '1')
    await vi.advanceTimersByTimeAsync(silenceMs - 1)
    last().say('beat', '2')
    await vi.advanceTimersByTimeAsync(silenceMs - 1)
    expect([stale(), sources.length]).toEqual([0, 1])
    await vi.advanceTimersByTimeAsync(1)
    expect(stale()).toBe(1)
    await vi.advanceTimersByTimeAsync(backoffMs(1, 1))
    expect(sources).toHaveLength(2)
  })

  it('gives up a stream that opens and never speaks', async () => {
    const { sources } = connect()
    await vi.advanceTimersByTimeAsync(8_000 + backoffMs(1, 1))
    expect(sources).toHaveLength(2)
    expect(sources[0]?.closed).toBe(true)
  })

  it('loads anew on a resync without closing the stream', async () => {
    const { last, loads, sources, heard } = connect()
    await settle()
    last().say('resync', '9')
    await settle()
    expect([loads(), sources.length]).toEqual([2, 1])
    expect(heard).toEqual(['beat 9'])
  })

  it('comes back at once when nudged while it waits, and stays when all is well', async () => {
    const { connection, last, loads } = connect()
    await settle()
    last().say('beat', '1')
    connection.nudge()
    expect(loads()).toBe(1)
    last().say('error')
    connection.nudge()
    expect(loads()).toBe(2)
  })

  it('does nothing more once it is closed', async () => {
    const { connection, last, loads } = connect()
    await settle()
    connection.close()
    last().say('error')
    await vi.advanceTimersByTimeAsync(60_000)
    expect(loads()).toBe(1)
    expect(last().closed).toBe(true)
  })
})

it('waits longer after every failure, spread, and never more than five seconds', () => {
  expect([1, 2, 3, 4, 5, 50].map((failures) => backoffMs(failures, 1))).toEqual([500, 1000, 2000, 4000, 5000, 5000])
  expect(backoffMs(5, 0)).toBe(2500)
})
