import { randomUUID } from 'node:crypto'
import type { Readable } from 'node:stream'
import type { LiveBeat, LiveEvent } from '#shared/schemas/live'
import type { Role } from '#shared/types/roles'
import type { Audience } from '../../../server/live/audience'
import { EventHub } from '../../../server/live/hub'
import type { LiveLog } from '../../../server/live/loop'
import { EventPump, type PumpOptions } from '../../../server/live/pump'
import { Scheduler } from '../../../server/live/scheduler'
import { EventStream } from '../../../server/live/stream'
import type { Listener } from '../../../server/repositories/listening'
import { toldClock } from '../../../server/utils/clock'
import type { Context, Principal } from '../../../server/utils/context'
import { morning } from '../../factories/drafts'
import { makeShop, type Shop } from '../../factories/shop'
import { openSchema, type Schema } from './schema'

/** No test waits longer than this for something that should have happened. */
const deadlineMs = 10_000

/** What server-sent events say, in the order in which they are heard. */
export interface Heard {
  name: string
  id: number | null
  data: LiveEvent | LiveBeat
}

/** Reads a stream of server-sent events and waits for what it is to say. */
export class Ear {
  readonly heard: Heard[] = []
  readonly raw: string[] = []
  ended = false
  #rest = ''
  readonly #waiting = new Set<() => void>()

  constructor(readonly stream: Readable) {
    stream.setEncoding('utf8')
    stream.on('data', (text: string) => this.#take(text))
    stream.on('close', () => this.#end())
    stream.on('end', () => this.#end())
    stream.on('error', () => this.#end())
  }

  /** Real events, without beats and resyncs. */
  get events(): LiveEvent[] {
    return this.heard.filter(({ name }) => name === 'message').map(({ data }) => data as LiveEvent)
  }

  named(name: string): LiveBeat[] {
    return this.heard.filter((one) => one.name === name).map(({ data }) => data as LiveBeat)
  }

  /** Resolves once `fits` holds, looked at after everything that is heard. */
  async until(fits: () => boolean, what = fits.toString()): Promise<void> {
    const late = AbortSignal.timeout(deadlineMs)
    while (!fits()) {
      await new Promise<void>((resolve, reject) => {
        const expire = () => reject(new Error(`not heard in time: ${what}; heard ${JSON.stringify(this.heard.slice(-5))}`))
        late.addEventListener('abort', expire, { once: true })
        this.#waiting.add(() => {
          late.removeEventListener('abort', expire)
          resolve()
        })
      })
    }
  }

  #end(): void {
    this.ended = true
    this.#wake()
  }

  #wake(): void {
    for (const resolve of this.#waiting) resolve()
    this.#waiting.clear()
  }

  #take(text: string): void {
    this.raw.push(text)
    this.#rest += text
    for (let end = this.#rest.indexOf('\n\n'); end >= 0; end = this.#rest.indexOf('\n\n')) {
      this.#hear(this.#rest.slice(0, end))
      this.#rest = this.#rest.slice(end + 2)
    }
    this.#wake()
  }

  #hear(block: string): void {
    const field = (name: string) => block.split('\n').find((line) => line.startsWith(`${name}: `))?.slice(name.length + 2)
    const data = field('data')
    if (data === undefined) return
    const id = field('id')
    this.heard.push({ name: field('event') ?? 'message', id: id === undefined ? null : Number(id), data: JSON.parse(data) as LiveEvent })
  }
}

/** One process of a shop: a hub with its pump, and timers where the test wants them to fire. */
export class Station {
  readonly hub = new EventHub()
  readonly pump: EventPump
  #scheduler: Scheduler | null = null
  readonly #streams: EventStream[] = []

  constructor(readonly live: LiveShop, options: Partial<PumpOptions> = {}) {
    this.pump = new EventPump({ db: live.db, clock: live.clock, hub: this.hub, log: live.log, ...options })
    this.pump.start()
  }

  startTimers(): void {
    const { db, clock, log } = this.live
    this.#scheduler = new Scheduler({ db, clock, log, wake: this.hub.wake, longestRestMs: 20 })
    this.#scheduler.start()
  }

  /** Opens a stream and waits until it runs live. */
  async listen(options: { audience?: Audience; lastEventId?: number; listener?: Listener } = {}): Promise<Ear> {
    const { audience = { boothId: null }, lastEventId = null, listener = { sessionId: null, deviceId: null } } = options
    const { db, clock, log } = this.live
    const stream = new EventStream({ db, clock, hub: this.hub, log, audience, lastEventId, listener })
    this.#streams.push(stream)
    const ear = new Ear(stream)
    await stream.open()
    return ear
  }

  async stop(): Promise<void> {
    this.hub.close()
    await this.#scheduler?.stop()
    await this.pump.stop()
  }
}

interface LogLine {
  level: 'error' | 'warn' | 'info'
  message: string
}

/** A schema in which nobody fires timers but the test, with a shop and a clock that the test moves. */
export interface LiveShop extends Schema {
  shop: Shop
  time: { now: number }
  clock: Context['clock']
  log: LiveLog
  lines: LogLine[]
  as(role: Role, wake?: Context['wake']): Context
  asScreen(boothId: string, wake?: Context['wake']): Context
}

/** @param name of the schema beside the server's; a file has its own, so that it counts only what it did */
export async function openLiveShop(name: string): Promise<LiveShop> {
  const schema = await openSchema(name)
  const shop = await makeShop(schema.admin)
  const time = { now: morning }
  const clock = toldClock(() => time.now)
  const lines: LogLine[] = []
  const write = (level: LogLine['level']) => (_facts: unknown, message?: string) => void lines.push({ level, message: message ?? String(_facts) })
  const log = { error: write('error'), warn: write('warn'), info: write('info') } as LiveLog
  const context = (principal: Principal, wake: Context['wake'] = () => {}): Context => ({ db: schema.db, clock, principal, requestId: randomUUID(), wake })
  return {
    ...schema, shop, time, clock, log, lines,
    as: (role, wake) => context({ kind: 'user', device: null, user: {
      id: shop.users[role], role, name: `${role} ${shop.mark}`, initials: 'XY', email: `${role}-${shop.mark}@potbell.example`, sessionId: '0'.repeat(64),
    } }, wake),
    asScreen: (boothId, wake) => context({ kind: 'device', user: null, device: {
      id: shop.screenId, kind: 'screen', name: `Screen ${shop.mark}`, boothId, scaleId: null,
    } }, wake),
  }
}
