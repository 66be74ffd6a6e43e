import { addDays, shopDate } from '#shared/utils/zone'
import { recordClimate } from '../../server/services/climate'
import { toldClock } from '../../server/utils/clock'
import type { Context } from '../../server/utils/context'
import { newId } from '../../server/utils/ids'
import { hoursOf, isWorkingDay, at, workingDays } from './calendar'
import { foundShop, reviseShop } from './found'
import { Hands, type MixedPot, type PotOrder } from './hands'
import { boothOfMix, moveJobs, openJob, type DemoJob } from './jobs'
import { looseMixes, orders } from './orders'
import { booths, crews, shop as theShop, type BoothKey } from './places'
import { planPot } from './pot'
import { JobBook } from './progress'
import { randomOf, type Random } from './random'
import { acknowledgeMissed, endPastWindows, settleDueTimers, settleReviews } from './settle'
import { asUser, the, type DemoShop } from './shop'
import { openingStock, Stores } from './stores'
import { Yard, type Day, type PlannedPot } from './yard'

const minuteMs = 60_000

/** The demo's clock: it is told the time, and never runs backwards. */
export interface ToldTime {
  tell(at: number): void
}

export interface HistoryOptions {
  /** Present instant, epoch milliseconds. */
  now: number
  /** Weeks of work before today. */
  weeks: number
  /** Hears one line a week. */
  say(line: string): void
}

/** What a history has made. */
export interface HistoryReport {
  batches: number
  jobs: number
  /** Ids of batches in which something went wrong on purpose. */
  deviations: Map<string, string>
  /** Coats that went on after their window had closed. */
  missedWindows: number
}

/** Materials that nobody orders any more, so that shelves run low. */
const notReordered = new Set(['S-640', 'U-905'])
/** How many pots a booth begins on a day. */
const dailyPots: Record<BoothKey, [number, number]> = { 1: [2, 3], 2: [1, 2], 3: [1, 2] }
const reviewsStayOpenDays = 9

interface Action {
  at: number
  booth: BoothKey
  run(ctx: Context): Promise<void>
}

/** Lets the invented shop work, from its founding until now, through the same services as everybody else. */
export class History {
  readonly #ctx: Context
  readonly #time: ToldTime
  readonly #options: HistoryOptions
  readonly #random: Random
  readonly #shop: DemoShop
  readonly #stores: Stores
  readonly #yard: Yard
  readonly #hands: Hands
  readonly #book = new JobBook()
  readonly #nextOrder: Record<1 | 2 | 3, number> = { 1: 0, 2: 0, 3: 0 }
  readonly #plans = new Map<string, string>()
  readonly #report: HistoryReport = { batches: 0, jobs: 0, deviations: new Map(), missedWindows: 0 }
  #looseSoFar = 0

  private constructor(ctx: Context, time: ToldTime, options: HistoryOptions, shop: DemoShop) {
    this.#ctx = ctx
    this.#time = time
    this.#options = options
    this.#random = randomOf(20_261)
    this.#shop = shop
    this.#stores = new Stores(shop, this.#random)
    this.#yard = new Yard(shop, this.#random)
    this.#hands = new Hands(shop, this.#stores, this.#random)
  }

  /** Founds the shop and lets it work. */
  static async run(ctx: Context, time: ToldTime, options: HistoryOptions): Promise<HistoryReport> {
    const { zone } = theShop
    const today = shopDate(options.now, zone)
    const from = addDays(today, -7 * options.weeks)
    time.tell(at(addDays(from, -3), zone, '09:00'))
    const history = new History(ctx, time, options, await foundShop(ctx))
    return history.#work(workingDays(from, today), today)
  }

  async #work(days: string[], today: string): Promise<HistoryReport> {
    const materials = [...this.#shop.materials.values()].map(({ material }) => material)
    const opened = addDays(days[0] ?? today, -2)
    await this.#stores.receive(this.#manager, openingStock(opened, today, materials, this.#random))
    for (const [index, day] of days.entries()) {
      if (index === Math.trunc(days.length / 2)) {
        this.#time.tell(at(day, this.#shop.zone, '06:20'))
        await reviseShop(this.#manager, this.#shop)
      }
      await this.#day(day)
      if (index % 5 === 4) this.#options.say(`  week ${Math.trunc(index / 5) + 1}, until ${day}: ${this.#report.batches} batches, ${this.#report.jobs} jobs`)
    }
    await this.#evening(today)
    return this.#report
  }

  async #day(day: string): Promise<void> {
    const hours = hoursOf(day, this.#shop.zone)
    const until = Math.min(hours.closesAt + 60 * minuteMs, this.#options.now - 10 * minuteMs)
    if (hours.opensAt > until) return
    this.#time.tell(hours.opensAt - 25 * minuteMs)
    await this.#takeOrders(day)
    await this.#restock(day)
    const climate = await this.#readClimate(hours.opensAt - 15 * minuteMs)
    const airC = new Map([...climate].map(([booth, { airC: c }]) => [booth, c]))
    const pots = this.#plan({ ...hours, airC }, until)
    const actions = pots.flatMap((pot) => this.#actionsOf(pot, the(climate, pot.booth))).sort((a, b) => a.at - b.at)
    for (const side of sideBySide(actions)) {
      await Promise.all(side.map(({ at: when, run }) => run({ ...this.#ctx, clock: toldClock(() => when), requestId: newId() })))
    }
    if (hours.closesAt + 30 * minuteMs > this.#options.now) return
    this.#time.tell(hours.closesAt + 30 * minuteMs)
    const moves = this.#book.moves(hours.closesAt + 30 * minuteMs, this.#yard.pending)
    if (moves.jobs.size + moves.steps.size > 0) await moveJobs(this.#foreman, moves)
    await endPastWindows(this.#ctx)
    if (addDays(day, reviewsStayOpenDays) < shopDate(this.#options.now, this.#shop.zone)) await settleReviews(this.#foreman)
  }

  get #manager(): Context {
    return asUser(this.#ctx, the(this.#shop.users, 'RF'))
  }

  get #foreman(): Context {
    return asUser(this.#ctx, the(this.#shop.users, 'BE'))
  }

  /** Books jobs in until each booth has work for two days. */
  async #takeOrders(day: string): Promise<void> {
    for (const booth of [1, 2, 3] as const) {
      while (this.#yard.backlog(booth) < dailyPots[booth][1] * 3) {
        const job = await this.#order(booth, day, 'planned')
        this.#yard.admit(job, at(day, this.#shop.zone, '07:00'))
      }
    }
  }

  async #order(booth: 1 | 2 | 3, day: string, state: DemoJob['state']): Promise<DemoJob> {
    const list = orders[booth]
    const order = list[this.#nextOrder[booth] % list.length]
    if (!order) throw new Error(`booth ${booth} has no orders`)
    this.#nextOrder[booth]++
    const job = await openJob(this.#foreman, this.#shop, order, { dueOn: addDays(day, this.#random.between(9, 20)), state })
    this.#book.add(job)
    this.#report.jobs++
    return job
  }

  async #restock(day: string): Promise<void> {
    const materials = [...this.#shop.materials.values()].map(({ material }) => material).filter(({ code }) => !notReordered.has(code))
    const wanted = this.#stores.wanted(day, materials)
    if (wanted.length > 0) await this.#stores.receive(this.#manager, wanted)
  }

  async #readClimate(when: number): Promise<Map<BoothKey, PotOrder['climate']>> {
    const read = new Map<BoothKey, PotOrder['climate']>()
    for (const { key } of booths) {
      this.#time.tell(when + key * minuteMs)
      const air = this.#random.around(186, 228)
      const surface = air - this.#random.between(3, 11)
      const reading = { airC: decimal(air), rhPct: `${this.#random.around(40, 64)}`, surfaceC: decimal(surface) }
      await recordClimate(asUser(this.#ctx, the(this.#shop.users, crews[key][0] ?? 'BE')), { boothId: the(this.#shop.booths, key), ...reading })
      read.set(key, reading)
    }
    return read
  }

  #plan(day: Day, until: number): PlannedPot[] {
    const quotas = new Map(booths.map(({ key }) => [key, this.#random.between(...dailyPots[key])]))
    const pots = this.#yard.plan(day, quotas, until)
    if (!this.#random.inThousand(480)) return pots
    const loose = looseMixes[this.#looseSoFar % looseMixes.length]
    if (!loose) return pots
    this.#looseSoFar++
    const pot = this.#yard.planLoose(day, boothOfMix(this.#shop, loose.mix), loose.mix, loose, pots)
    return pot && pot.closeAt <= until && this.#isStocked(loose, day.day) ? [...pots, pot] : pots
  }

  #isStocked({ mix, grams }: { mix: string, grams: number }, day: string): boolean {
    const { revision } = the(this.#shop.mixes, mix).current
    const { targets } = planPot(this.#shop, revision, { totalG: `${grams}` })
    return revision.parts.every(({ material }, index) => this.#stores.usable(material, day) > (targets[index] ?? 0) * 2)
  }

  #actionsOf(pot: PlannedPot, climate: PotOrder['climate']): Action[] {
    const order = this.#orderOf(pot, climate)
    const { booth } = pot
    let mixed: MixedPot | null = null
    const mix: Action = { booth, at: pot.startAt + 7 * minuteMs, run: async (ctx) => { mixed = await this.#hands.mix(ctx, order) } }
    const seal: Action = { booth, at: pot.startAt + 8 * minuteMs + 20_000, run: (ctx) => this.#seal(ctx, order) }
    if (pot.deviation === 'stopped') return [mix, seal]
    const spent = pot.deviation === 'late' || pot.deviation === 'past-life'
    return [
      mix, seal,
      { booth, at: pot.firstAt, run: (ctx) => this.#hands.spray(ctx, order, 'first-spray') },
      ...(spent ? [{ booth, at: pot.lastAt - minuteMs, run: (ctx: Context) => settleDueTimers(ctx, order.id) }] : []),
      {
        booth, at: pot.lastAt, run: async (ctx) => {
          await this.#hands.spray(ctx, order, 'last-spray')
          if (!pot.task) return
          this.#book.sprayed(pot.task, pot.lastAt)
          if (pot.task.deadline !== null && pot.firstAt > pot.task.deadline) this.#report.missedWindows++
        },
      },
      {
        booth, at: pot.closeAt, run: async (ctx) => {
          if (mixed) await this.#hands.empty(ctx, order, mixed)
        },
      },
    ]
  }

  async #seal(ctx: Context, order: PotOrder): Promise<void> {
    await this.#hands.seal(ctx, order)
    this.#report.batches++
    if (order.deviation) this.#report.deviations.set(order.id, order.deviation)
  }

  #orderOf({ booth, mix, task, loose, deviation, startAt }: PlannedPot, climate: PotOrder['climate']): PotOrder {
    const common = { id: newId(), mix, booth, climate, deviation, startAt, mixer: this.#random.pick(crews[booth]) }
    if (!task) {
      if (!loose) throw new Error('a pot is neither for a job nor loose')
      return { ...common, planId: newId(), potNumber: 1, potCount: 1, of: loose }
    }
    const stage = task.stages[task.stage]
    const rack = task.job.racks[task.rack]
    if (!stage || !rack) throw new Error(`the job ${task.job.code} has no such coat or rack`)
    return {
      ...common, planId: this.#planId(`${task.job.id} ${task.stage}`), potNumber: task.rack + 1, potCount: task.job.racks.length,
      of: { stage, pieceIds: rack.pieceIds, mm2: rack.mm2 },
    }
  }

  /** Pots of one coat share their plan. */
  #planId(key: string): string {
    const known = this.#plans.get(key) ?? newId()
    this.#plans.set(key, known)
    return known
  }

  /** How today stands: what may be mixed is on the bench's list, new jobs wait, one is held. */
  async #evening(today: string): Promise<void> {
    const { now } = this.#options
    this.#time.tell(now)
    await this.#takeOrders(today)
    for (const booth of [1, 2, 3] as const) await this.#order(booth, addDays(today, 7), 'planned')
    const moves = this.#book.moves(now, this.#yard.pending)
    for (const task of this.#yard.pending) {
      const step = task.stages[task.stage]?.jobStep
      if (step && task.ready <= at(today, this.#shop.zone, '16:00')) moves.steps.set(step.id, { state: step.state, benchListOn: today })
    }
    const held = this.#book.open.find(({ state, steps }) => state === 'running' && !steps.some(({ id }) => moves.steps.get(id)?.benchListOn))
      ?? this.#book.open.find(({ state }) => state === 'running')
    if (held) {
      held.state = 'held'
      moves.jobs.set(held.id, 'held')
    }
    await moveJobs(this.#foreman, moves)
    await endPastWindows(this.#ctx)
    await settleDueTimers(this.#ctx)
    await acknowledgeMissed(this.#foreman)
    if (!isWorkingDay(today)) await this.#readClimate(now - 4 * minuteMs)
  }
}

/** Neighbours in time that happen in different booths, so that they may be done at once; order in a booth is kept. */
function sideBySide(actions: readonly Action[]): Action[][] {
  const sides: Action[][] = []
  for (const action of actions) {
    const last = sides.at(-1)
    if (last && last.every(({ booth }) => booth !== action.booth)) last.push(action)
    else sides.push([action])
  }
  return sides
}

/** Tenths as a decimal. */
const decimal = (tenths: number): string => `${Math.trunc(tenths / 10)}.${tenths % 10}`
