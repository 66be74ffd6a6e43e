import type { BenchStep } from '#shared/schemas/bench'
import { shopDate } from '#shared/utils/zone'
import { findPots } from '../../server/repositories/pots'
import { readBench } from '../../server/services/bench'
import { closeBatch } from '../../server/services/batch-close'
import { sealBatch } from '../../server/services/batches'
import { latestClimate, recordClimate } from '../../server/services/climate'
import { windowsAt } from '../../server/services/windows'
import type { Context } from '../../server/utils/context'
import { newId } from '../../server/utils/ids'
import { toInstant } from '../../server/utils/rows'
import { mutate } from '../../server/utils/transactions'
import { Hands, type PotOrder } from './hands'
import { boothOfMix, gunFor, moveJobs } from './jobs'
import { loadLots, loadShop } from './load'
import { booths, crews, type BoothKey, type GunKey } from './places'
import { potLifeOf } from './pot'
import { randomOf } from './random'
import { asUser, the, type DemoShop } from './shop'
import { Stores } from './stores'

const minuteMs = 60_000
const forgottenMs = 12 * 60 * minuteMs
const climateAgesMs = 2 * 60 * minuteMs

/** What a refresh has done. */
export interface RefreshReport {
  closed: number
  pots: number
  windows: number
}

/** The air in the booths when a shop is opened; pot lives are then the sheet's own. */
const air = { airC: '20', rhPct: '48', surfaceC: '19.4' }

/** Three pots that a newcomer should find: by mix, the first that stands ready. */
const wanted = [
  { booth: 1, mixes: ['US-50', 'AW-80', 'US-40', 'AM-30', 'AS-10', 'AG-80', 'TX-100'], loose: { mix: 'AW-80', purpose: 'Touch-up of a transport scratch', grams: 240 }, ends: 'soon' },
  { booth: 2, mixes: ['WW-10', 'WT-10', 'WS-10'], loose: { mix: 'WW-10', purpose: 'Adhesion test, warm white', grams: 300 }, ends: 'late' },
  { booth: 3, mixes: ['CV-10'], loose: { mix: 'CV-10', purpose: 'Handrail sample', grams: 350 }, ends: 'closing' },
] as const

/** Coats whose window opens soon after, so that one stands open on the screens. */
const opening = ['WS-5', 'ST-600', 'NS-40', 'NG-40'] as const

/** Opens the demo shop for the day: forgotten pots are emptied, and where none is left alive, three new ones stand. */
export async function openToday(ctx: Context): Promise<RefreshReport> {
  const today = await Today.open(ctx)
  const closed = await today.closeForgotten()
  await today.listCoats()
  await today.readClimate()
  const pots = await today.mixPots()
  const windows = await today.openWindow()
  return { closed, pots, windows }
}

/** One opening of the shop; instants in epoch milliseconds. */
class Today {
  readonly #ctx: Context
  readonly #now: number
  readonly #shop: DemoShop
  readonly #stores: Stores
  readonly #hands: Hands

  private constructor(ctx: Context, now: number, shop: DemoShop, stores: Stores, hands: Hands) {
    this.#ctx = ctx
    this.#now = now
    this.#shop = shop
    this.#stores = stores
    this.#hands = hands
  }

  static async open(ctx: Context): Promise<Today> {
    const now = await ctx.clock.now(ctx.db)
    const random = randomOf(Math.trunc(now / minuteMs))
    const shop = await loadShop(ctx.db)
    const stores = new Stores(shop, random, await loadLots(ctx.db))
    return new Today(ctx, now, shop, stores, new Hands(shop, stores, random))
  }

  /** Empties pots whose life was up long ago; a mix that was never finished goes into the log first. */
  async closeForgotten(): Promise<number> {
    const pots = (await findPots({ liveAt: this.#now }, this.#ctx.db)).filter(({ endsAt }) => endsAt !== null && Date.parse(endsAt) < this.#now - forgottenMs)
    for (const { id, stage, endsAt, firstSprayAt, guns } of pots) {
      if (stage === 'mixing') await sealBatch(this.#ctx, { draftId: id })
      // Nobody sprayed it while the demo stood still: it was emptied when its life was up, or after its last shot.
      const at = [endsAt, ...guns.flatMap((gun) => [gun.firstSprayAt, gun.lastSprayAt])].flatMap((one) => one ?? []).sort().at(-1) ?? null
      await closeBatch(this.#ctx, id, { leftoverG: null, at, sprayed: firstSprayAt !== null })
    }
    return pots.length
  }

  /** Keeps coats on the benches' list: those that were on it, else the first coat of a planned job. */
  async listCoats(): Promise<void> {
    const today = shopDate(this.#now, this.#shop.zone)
    const { db } = this.#ctx
    const ready = await this.#ready()
    const next = ready.length > 0 ? [] : await db('jobs').where('state', 'planned').orderBy('due_on').limit(1).select<{ id: string }[]>('id')
    const listed = await db('job_steps').whereNot('state', 'done').where('bench_list_on', '<', today).select<{ id: string }[]>('id')
    const first = next[0] ? await db('job_steps as s').join('schedule_steps as c', 'c.id', 's.schedule_step_id').where('s.job_id', next[0].id)
      .orderBy('s.position').select<{ id: string, kind: string }[]>('s.id', 'c.kind') : []
    const coat = first.find(({ kind }) => kind === 'coat')
    if (listed.length === 0 && !coat) return
    await mutate(this.#ctx, async (m) => {
      const moved = { updated_at: toInstant(m.now), version: m.trx.raw('version + 1') }
      const ids = [...listed.map(({ id }) => id), ...(coat ? [coat.id] : [])]
      await m.trx('job_steps').whereIn('id', ids).update({ bench_list_on: today, ...moved })
      const prepared = first.slice(0, coat ? first.indexOf(coat) : 0).map(({ id }) => id)
      if (prepared.length > 0) await m.trx('job_steps').whereIn('id', prepared).update({ state: 'done', ...moved })
      m.audit({ action: 'bench-list.moved', subject: 'settings:shop', facts: { steps: ids, prepared, day: today } })
    })
  }

  /** Reads each booth's instrument anew when the last reading has aged. */
  async readClimate(): Promise<void> {
    const latest = await latestClimate(this.#ctx.db)
    for (const { key } of booths) {
      const boothId = this.#shop.booths.get(key)
      const at = boothId === undefined ? undefined : latest.get(boothId)?.at
      if (boothId === undefined || (at !== undefined && this.#now - Date.parse(at) < climateAgesMs)) continue
      await recordClimate(this.#ctx, { boothId, ...air })
    }
  }

  /** Three pots in three booths, unless one still lives. */
  async mixPots(): Promise<number> {
    if ((await findPots({ liveAt: this.#now }, this.#ctx.db)).some(({ endsAt }) => endsAt !== null)) return 0
    for (const { booth, mixes, loose, ends } of wanted) {
      const step = await this.#readyCoat(mixes)
      const mix = step ? this.#codeOf(step) : loose.mix
      const reactiveAt = this.#reactiveAt(mix, ends)
      const order = this.#orderOf(step, { ...loose, mix }, booth, reactiveAt - 3 * minuteMs, reactiveAt)
      await this.#stock(order)
      await this.#hands.mix(this.#ctx, order)
      await this.#hands.seal(this.#ctx, order)
      await this.#startJob(step)
      if (ends !== 'late') await this.#hands.spray(this.#ctx, order, 'first-spray', reactiveAt + 9 * minuteMs)
    }
    return wanted.length
  }

  /** One coat that was sprayed a while ago and may be overcoated now, unless a window is open already. */
  async openWindow(): Promise<number> {
    const open = await windowsAt({}, this.#now, this.#ctx.db)
    if (open.some(({ state }) => state === 'open' || state === 'closing')) return 0
    const step = await this.#readyCoat(opening)
    if (!step) return 0
    const mix = this.#codeOf(step)
    const order = this.#orderOf(step, { mix, purpose: '', grams: 0 }, boothOfMix(this.#shop, mix), this.#now - 108 * minuteMs)
    await this.#stock(order)
    const pot = await this.#hands.mix(this.#ctx, order)
    await this.#hands.seal(this.#ctx, order)
    await this.#startJob(step)
    await this.#hands.spray(this.#ctx, order, 'first-spray', this.#now - 95 * minuteMs)
    await this.#hands.spray(this.#ctx, order, 'last-spray', this.#now - 66 * minuteMs)
    await this.#hands.empty(this.#ctx, order, pot, this.#now - 61 * minuteMs)
    return 1
  }

  async #ready(): Promise<BenchStep[]> {
    return (await readBench(this.#ctx)).today.filter(({ ready, pieces }) => ready === 'ready' && pieces.length > 0)
  }

  async #readyCoat(codes: readonly string[]): Promise<BenchStep | null> {
    const ready = await this.#ready()
    return ready.find((step) => this.#shop.mixes.has(this.#codeOf(step)) && codes.includes(this.#codeOf(step))) ?? null
  }

  #codeOf({ mixId }: BenchStep): string {
    return [...this.#shop.mixes].find(([, { id }]) => id === mixId)?.[0] ?? ''
  }

  /** When the hardener went in, so that the pot ends as it should: its life is the sheet's at 20 °C. */
  #reactiveAt(mix: string, ends: (typeof wanted)[number]['ends']): number {
    const life = potLifeOf(the(this.#shop.mixes, mix).current.revision, air.airC)
    if (!life) throw new Error(`the mix ${mix} has no pot life`)
    if (ends === 'soon') return this.#now + 3 * minuteMs - life.lifeMin * minuteMs
    if (ends === 'closing') return this.#now + minuteMs - life.lateMin * minuteMs
    return this.#now - 6 * minuteMs
  }

  #orderOf(step: BenchStep | null, loose: { mix: string, purpose: string, grams: number }, booth: BoothKey, startAt: number, reactiveAt?: number): PotOrder {
    const common = {
      id: newId(), planId: newId(), mix: loose.mix, booth, climate: air, materialC: air.airC, deviation: null, startAt, reactiveAt,
      mixer: crews[booth].find((key) => this.#shop.users.has(key)) ?? 'TV',
    }
    const [first] = step?.pieces ?? []
    if (!step || !first) return { ...common, potNumber: 1, potCount: 1, of: { purpose: loose.purpose, grams: loose.grams } }
    const rack = step.pieces.filter((piece) => piece.rack === first.rack)
    const racks = [...new Set(step.pieces.map((piece) => piece.rack))]
    const mm2 = rack.reduce((sum, { areaM2 }) => sum + mm2Of(areaM2), 0)
    const gun = [...this.#shop.guns].find(([, id]) => id === step.gunId)?.[0] ?? gunFor(booth, loose.mix, mm2)
    return { ...common, potNumber: 1, potCount: racks.length, of: { stage: coatOf(step, gun), pieceIds: rack.map(({ id }) => id), mm2 } }
  }

  /** With its first coat a planned job runs. */
  async #startJob(step: BenchStep | null): Promise<void> {
    const planned = step && (await this.#ctx.db('jobs').where({ id: step.jobId, state: 'planned' }).first('id'))
    if (!planned) return
    await moveJobs(asUser(this.#ctx, the(this.#shop.users, 'BE')), { jobs: new Map([[step.jobId, 'running']]), steps: new Map() })
  }

  /** Books in what the pot needs and the shelves no longer hold. */
  async #stock(order: PotOrder): Promise<void> {
    const day = shopDate(order.startAt, this.#shop.zone)
    const { revision } = the(this.#shop.mixes, order.mix).current
    const short = revision.parts.map(({ material }) => the(this.#shop.materials, material).material)
      .filter(({ code, reorderG, deliveryG }) => this.#stores.usable(code, day) < Math.min(reorderG, deliveryG) * 10)
      .map(({ code, deliveryG }) => ({ material: code, delivered: deliveryG * 10, receivedOn: day }))
    if (short.length > 0) await this.#stores.receive(asUser(this.#ctx, the(this.#shop.users, 'RF')), short)
  }
}

/** Whole square millimetres of an area in square metres. */
function mm2Of(areaM2: string): number {
  const [whole = '0', fraction = ''] = areaM2.split('.')
  return parseInt(whole, 10) * 1_000_000 + parseInt(fraction.padEnd(6, '0').slice(0, 6), 10)
}

function coatOf(step: BenchStep, gun: GunKey) {
  const grams = parseInt(step.filmWeightGsm ?? '100', 10)
  return {
    gun, coatsInPot: 1,
    jobStep: { id: step.jobStepId, step: { gsm: [grams, grams, grams] as const, gsmIs: step.filmWeightIs ?? ('deposited' as const), shape: step.gunShape } },
  }
}
