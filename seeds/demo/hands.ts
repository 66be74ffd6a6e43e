import { DraftBody, type DraftInput } from '#shared/schemas/drafts'
import { shopDate } from '#shared/utils/zone'
import type { Context } from '../../server/utils/context'
import { isoOf, toInstant } from '../../server/utils/rows'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { m2Of } from './cut-lists'
import type { BoothKey, GunKey } from './places'
import { guns } from './places'
import type { DemoRevision } from './mixes'
import { planPot, pourPot, type Deviation, type Weighing } from './pot'
import type { Random } from './random'
import type { DemoStep } from './schedules'
import { asUser, the, type DemoShop } from './shop'
import { gunFigures, type Stage } from './stages'
import type { Stores } from './stores'
import { gramsOf, type Tenths } from './weights'

const secondMs = 1000

/** What the hands need to know of a job's coat. */
interface Coat extends Pick<Stage, 'gun' | 'coatsInPot'> {
  jobStep: { id: string, step: Pick<DemoStep, 'gsm' | 'gsmIs' | 'shape'> }
}

/** Everything that a pair of hands needs to know to mix one pot. Instants in epoch milliseconds. */
export interface PotOrder {
  id: string
  planId: string
  potNumber: number
  potCount: number
  mix: string
  /** A coat on a rack of a job, or a loose mix. */
  of: { stage: Coat, pieceIds: string[], mm2: number } | { purpose: string, grams: number }
  booth: BoothKey
  mixer: string
  climate: { airC: string, rhPct: string, surfaceC: string }
  deviation: Deviation | null
  startAt: number
  /** The instant at which the hardener goes in, where it must be exact. */
  reactiveAt?: number
  /** Degrees Celsius of the mixed material, where it must be exact. */
  materialC?: string
}

export interface MixedPot {
  id: string
  poured: Tenths
  leftover: Tenths
}

const iso = (ms: number) => isoOf(toInstant(ms))

/** The sprayers of the demo: they mix, spray and empty pots through the same services as everybody else. */
export class Hands {
  readonly #shop: DemoShop
  readonly #stores: Stores
  readonly #random: Random

  constructor(shop: DemoShop, stores: Stores, random: Random) {
    this.#shop = shop
    this.#stores = stores
    this.#random = random
  }

  /** Pours a pot and saves it as a draft; a stopped one carries why. */
  async mix(ctx: Context, order: PotOrder): Promise<MixedPot> {
    const { revision } = the(this.#shop.mixes, order.mix).current
    const { plan, scale, targets } = planPot(this.#shop, revision, amountOf(order))
    const { weighings, correction } = pourPot(revision, targets, scale, this.#random, order.deviation)
    const timed = this.#timed(order, revision, weighings)
    const components = this.#weighed(order, revision, timed)
    const reactiveAt = timed.find(({ index }) => revision.parts[index]?.reactive)?.at ?? null
    const doneAt = (timed.at(-1)?.at ?? order.startAt) + 45 * secondMs
    const mixer = the(this.#shop.users, order.mixer)
    await saveDraft(asUser(ctx, mixer), order.id, DraftBody.parse({
      seq: 1, planId: order.planId, potNumber: order.potNumber, potCount: order.potCount,
      mixRevisionId: the(this.#shop.mixes, order.mix).current.id, ...this.#whatFor(order),
      boothId: the(this.#shop.booths, order.booth), scaleId: the(this.#shop.scales, scale), mixedByUserId: mixer.id, plan,
      components,
      corrections: correction ? [{ ...correction, at: iso(doneAt - 120 * secondMs) }] : [],
      reactiveAt: reactiveAt === null ? null : iso(reactiveAt), climate: order.climate, viscosity: this.#viscosity(revision.viscosity, order.materialC),
      stopped: order.deviation === 'stopped' ? { at: iso(doneAt), reason: 'Skin in the tin of hardener, lumps in the cup.' } : null,
    } satisfies DraftInput))
    const poured = weighings.reduce((sum, { tenths }) => sum + tenths, 0)
    return { id: order.id, poured, leftover: Math.trunc((poured * this.#random.around(5, 45)) / 1000) }
  }

  /** When each weighing was taken, one after the other. */
  #timed(order: PotOrder, revision: DemoRevision, weighings: readonly Weighing[]): (Weighing & { at: number })[] {
    let at = order.startAt + this.#random.between(70, 110) * secondMs
    const timed = weighings.map((weighing) => {
      const one = { ...weighing, at }
      at += this.#random.between(55, 95) * secondMs
      return one
    })
    const reactiveAt = timed.find(({ index }) => revision.parts[index]?.reactive)?.at
    const shift = order.reactiveAt === undefined || reactiveAt === undefined ? 0 : order.reactiveAt - reactiveAt
    return timed.map((one) => ({ ...one, at: one.at + shift }))
  }

  /** Takes what was weighed from the tins; a tin that runs empty is followed by the next. */
  #weighed(order: PotOrder, revision: DemoRevision, timed: readonly (Weighing & { at: number })[]): NonNullable<DraftInput['components']> {
    const day = shopDate(order.startAt, this.#shop.zone)
    const components: NonNullable<DraftInput['components']> = []
    for (const { index, tenths, round, at } of timed) {
      const part = revision.parts[index]
      if (!part) throw new Error(`the mix ${order.mix} has no component ${index}`)
      const pours = this.#stores.take(part.material, tenths, day).map((taken, n) => ({
        lotId: taken.lotId, grams: gramsOf(taken.tenths), at: iso(at + n * 15 * secondMs), source: 'typed' as const, round,
      }))
      const component = components.find((one) => one.index === index) ?? { index, pours: [] }
      if (component.pours.length === 0) components.push(component)
      component.pours.push(...pours)
    }
    return components
  }

  /** Puts the pot into the log. */
  async seal(ctx: Context, order: PotOrder): Promise<void> {
    await sealBatch(asUser(ctx, the(this.#shop.users, order.mixer)), { draftId: order.id })
  }

  /** First or last trigger pull of a pot: now, or at an instant that has passed. */
  async spray(ctx: Context, order: PotOrder, kind: 'first-spray' | 'last-spray', at: number | null = null): Promise<void> {
    const gunId = the(this.#shop.guns, gunOf(order))
    await recordBatchEvent(asUser(ctx, the(this.#shop.users, order.mixer)), order.id, { kind, gunId, at: at === null ? null : iso(at) })
  }

  /** Empties a pot: now, or at an instant that has passed. Most leftovers are weighed. */
  async empty(ctx: Context, order: PotOrder, pot: MixedPot, at: number | null = null): Promise<void> {
    const weighed = this.#random.inThousand(930)
    await closeBatch(asUser(ctx, the(this.#shop.users, order.mixer)), order.id, { leftoverG: weighed ? gramsOf(pot.leftover) : null, at: at === null ? null : iso(at) })
  }

  #whatFor(order: PotOrder) {
    const gunId = the(this.#shop.guns, gunOf(order))
    if ('purpose' in order.of) return { jobStepId: null, purpose: order.of.purpose, pieceIds: [], gunId }
    return { jobStepId: order.of.stage.jobStep.id, purpose: null, pieceIds: order.of.pieceIds, gunId }
  }

  /** Seconds through the cup, where the sheet names them. */
  #viscosity(wanted: DemoRevision['viscosity'], materialC = `${this.#random.between(18, 20)}.${this.#random.below(10)}`) {
    if (!wanted) return null
    const seconds = this.#random.around(parseInt(wanted.from, 10) - 1, parseInt(wanted.to, 10) + 1)
    return { cup: wanted.cup, seconds: `${seconds}`, materialC }
  }
}

/** Loose mixes go through the cup gun of the booth. */
function gunOf({ of, booth }: Pick<PotOrder, 'of' | 'booth'>): GunKey {
  if ('stage' in of) return of.stage.gun
  const gun = guns.find((one) => one.booth === booth && one.kind === 'cup-gun')
  if (!gun) throw new Error(`booth ${booth} has no cup gun`)
  return gun.key
}

function amountOf(order: PotOrder): Omit<DraftInput['plan'], 'scaleDivisionG'> {
  if ('purpose' in order.of) return { totalG: `${order.of.grams}` }
  const { stage, mm2 } = order.of
  const { step } = stage.jobStep
  const { efficiencyPct, residueG } = gunFigures(stage.gun, step.shape)
  return {
    areaM2: m2Of(mm2), filmWeightGsm: `${step.gsm?.[1] ?? 0}`, filmWeightIs: step.gsmIs ?? 'deposited', coats: stage.coatsInPot,
    transferEfficiencyPct: efficiencyPct, reserveG: residueG, reservePct: '3',
  }
}
