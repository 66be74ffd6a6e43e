import { planBatch, type BatchPlan } from '#shared/engine/batch'
import { D, print, sum, type Dec } from '#shared/engine/decimal'
import { EngineError } from '#shared/engine/error'
import { hasPotLife, readMix, type MixInput } from '#shared/engine/mix'
import { calculatePotLife, potLifeStart, warmerC } from '#shared/engine/pot-life'
import { calculatePour, type PourAnswer } from '#shared/engine/pour'
import { canWeigh, readScale, type ScaleInput } from '#shared/engine/scale'
import type { WorkingLine } from '#shared/engine/working'
import type { DraftBody, DraftPlan, PotLife } from '#shared/schemas/drafts'
import type { ScaleRecord } from '../repositories/draft-references'
import type { MixRevision } from '../repositories/mix-revisions'
import { notAfter } from './device-clock'

const minuteMs = 60_000

/** The mix as the arithmetic takes it: the revision, with the parts that the plan chose inside a range. */
export function mixInputOf(revision: MixRevision, plan: Pick<DraftPlan, 'mix'>): MixInput {
  return {
    basis: revision.basis,
    components: revision.components.map((component, index) => ({
      name: component.materialName,
      parts: plan.mix?.components[index]?.parts ?? component.parts,
      partsMax: component.partsMax ?? undefined,
      densityGPerMl: component.densityGPerMl ?? undefined,
      role: component.role,
      tolerancePct: component.tolerancePct ?? undefined,
      reactive: component.reactive,
    })),
  }
}

/** True when the plan names no mix, or this revision's with every figure in its range. */
export function plansThisMix(revision: MixRevision, { mix }: Pick<DraftPlan, 'mix'>): boolean {
  if (mix === undefined) return true
  return mix.basis === revision.basis && mix.components.length === revision.components.length
    && revision.components.every(({ parts, partsMax }, index) => {
      const planned = new D(mix.components[index]?.parts ?? '0')
      return planned.gte(parts) && planned.lte(partsMax ?? parts)
    })
}

/** The scale's record where one was used, else what the plan says of it. */
export function scaleInputOf(scale: ScaleRecord | null, plan: Pick<DraftPlan, 'scaleDivisionG' | 'scaleMpeG'>): ScaleInput {
  if (scale === null) return { divisionG: plan.scaleDivisionG, mpeG: plan.scaleMpeG }
  const classed = scale.accuracyClass !== null && scale.verificationIntervalG !== null
  return {
    divisionG: scale.divisionG,
    capacityG: scale.capacityG,
    mpeG: scale.mpeG ?? undefined,
    ...(classed ? { oimlClass: scale.accuracyClass ?? undefined, verificationIntervalG: scale.verificationIntervalG ?? undefined } : {}),
  }
}

/** The plan reckoned again. @throws EngineError with the path of the plan's field */
export function planOf(revision: MixRevision, plan: DraftPlan, scale: ScaleRecord | null): BatchPlan {
  const { divisionG, mpeG, ...record } = scaleInputOf(scale, plan)
  try {
    return planBatch({ ...plan, mix: mixInputOf(revision, plan), scaleDivisionG: divisionG, scaleMpeG: mpeG }, { scale: record })
  } catch (error) {
    if (error instanceof EngineError) throw new EngineError(error.code, `plan.${error.field}`, error.message)
    throw error
  }
}

/** Grams poured of each component that was poured at all. */
export function pouredOf(body: Pick<DraftBody, 'components'>): { index: number; pouredG: string }[] {
  return body.components
    .map(({ index, pours }) => ({ index, pouredG: print(sum(pours.map(({ grams }) => new D(grams)))) }))
    .filter(({ pouredG }) => pouredG !== '0')
    .sort((a, b) => a.index - b.index)
}

/** Everything in the cup, in grams. */
export const pouredTotalOf = (body: Pick<DraftBody, 'components'>): Dec =>
  sum(pouredOf(body).map(({ pouredG }) => new D(pouredG)))

/** No cup of a spray shop weighs more, in grams; bounds what is typed without a scale. */
const heaviestPotG = '1000000'

/** False for more than the scale can hold, or than any cup could. */
export function canHold(totalG: Dec, scale: ScaleInput): boolean {
  return canWeigh(readScale(scale), totalG) && totalG.lte(heaviestPotG)
}

/** A pot as poured, judged by the arithmetic. */
export interface BatchSums {
  plan: BatchPlan
  pour: PourAnswer
  pouredTotalG: string
  /** Furthest from the ratio among what follows the base, in per cent; null when nothing can be compared. */
  worstDeviationPct: string | null
  /** What that component does in the mix. */
  worstRole: string | null
  outOfTolerance: boolean
  working: WorkingLine[]
}

/**
 * Reckons a batch anew from what was planned and poured. The base is judged for the record only: the others follow it,
 * so its own distance from the plan spoils no ratio. Where a correction was taken, it is what was meant from then on.
 *
 * @throws EngineError for a plan that cannot be
 */
export function judgeBatch(revision: MixRevision, body: Pick<DraftBody, 'plan' | 'components' | 'corrections'>, scale: ScaleRecord | null): BatchSums {
  const plan = planOf(revision, body.plan, scale)
  const { divisionG, mpeG, ...record } = scaleInputOf(scale, body.plan)
  const mix = mixInputOf(revision, body.plan)
  const poured = pouredOf(body)
  const pour = calculatePour({ mix, scaleDivisionG: divisionG, scaleMpeG: mpeG, targetTotalG: meantTotalG(plan, body.corrections), poured }, { scale: record })
  const baseIndex = readMix(mix).baseIndex
  const followers = pour.components.map((one, index) => ({ ...one, role: revision.components[index]?.role ?? null, index })).filter(({ index }) => index !== baseIndex)
  const deviations = followers.flatMap(({ deviationPct, role }) => (deviationPct === null ? [] : [{ pct: new D(deviationPct), role }]))
  const worst = deviations.reduce<(typeof deviations)[number] | null>((most, next) => (most === null || next.pct.abs().gt(most.pct.abs()) ? next : most), null)
  return {
    plan,
    pour,
    pouredTotalG: print(sum(poured.map(({ pouredG }) => new D(pouredG)))),
    worstDeviationPct: worst && print(worst.pct),
    worstRole: worst && worst.role,
    outOfTolerance: followers.some(({ verdict }) => verdict === 'short' || verdict === 'too-much'),
    working: [...plan.working, ...pourWorking(mix, poured, pour, baseIndex)],
  }
}

/** Of a component, as far as it tells whether more of it was a correction. */
type PouredComponent = { index: number; role: string | null; verdict: string | null }

/**
 * Whether a pot was corrected: somebody took a correction, or poured again of something. Thinner added within its range,
 * for the viscosity, corrects nothing.
 */
export function wasCorrected(
  corrections: readonly { accepted: boolean }[], pours: readonly { index: number; round: number }[], components: readonly PouredComponent[],
): boolean {
  const thinned = new Set(components.filter(({ role, verdict }) => role === 'thinner' && verdict !== 'too-much').map(({ index }) => index))
  return corrections.some(({ accepted }) => accepted) || pours.some(({ index, round }) => round > 0 && !thinned.has(index))
}

/** The plan's total, or that of the last correction that was taken, grams. */
function meantTotalG(plan: BatchPlan, corrections: DraftBody['corrections']): string {
  const taken = corrections.filter(({ accepted }) => accepted).at(-1)
  return taken ? print(sum(taken.newTargets.map((grams) => new D(grams)))) : plan.exactTotalG
}

function pourWorking(mix: MixInput, poured: { index: number; pouredG: string }[], pour: PourAnswer, baseIndex: number): WorkingLine[] {
  const { components } = readMix(mix)
  const base = components[baseIndex]
  const baseG = poured.find(({ index }) => index === baseIndex)?.pouredG
  if (!base || baseG === undefined) return []
  return components.flatMap(({ index, name, weightParts }) => {
    const one = pour.components[index]
    if (index === baseIndex || !one) return []
    const target = {
      what: `${name}, target by the ${base.name} as poured`,
      formula: `${baseG} g × ${print(weightParts)} ÷ ${print(base.weightParts)}, on the scale's division`,
      value: one.targetG,
      unit: 'g',
    }
    if (one.pouredG === null || one.deviationPct === null) return [target]
    const formula = `(${one.pouredG} g ÷ ${baseG} g) ÷ (${print(weightParts)} ÷ ${print(base.weightParts)}) − 1`
    return [target, { what: `${name}, off the ratio`, formula, value: one.deviationPct, unit: '%' }]
  })
}

/** True where the mix hardens in the cup and its sheet says how fast. */
export function potLives(revision: MixRevision): boolean {
  const { potLifeMin, potLifeReferenceC, potLifeTable } = revision
  const known = potLifeTable !== null || (potLifeMin !== null && potLifeReferenceC !== null)
  return known && hasPotLife(readMix(mixInputOf(revision, {})))
}

/** First moment at which the pours themselves show a reactive component and another together, epoch milliseconds. */
export function reactiveByPours(revision: MixRevision, body: Pick<DraftBody, 'components'>, now: number): number | null {
  const pours = body.components.flatMap(({ index, pours: of }) => of.map(({ grams, at }) => ({ index, grams, at: notAfter(at, now) })))
  return potLifeStart(readMix(mixInputOf(revision, {})), pours)
}

type Temperatures = Pick<DraftBody, 'climate' | 'viscosity'>

/** The instants of a pot's life in epoch milliseconds, with what they were reckoned from. */
export interface PotTimes {
  startsAt: number
  lateAt: number
  endsAt: number
  basis: NonNullable<PotLife>['basis']
  potLifeMin: string
  temperatureC: string
}

/**
 * The life of a pot that became reactive at `startsAt`. The warmer of material and air counts; where neither was
 * measured, the sheet's own temperature, or the hottest row of its table: the careful side.
 *
 * @returns null where nothing runs
 */
export function potTimesOf(revision: MixRevision, { climate, viscosity }: Temperatures, startsAt: number | null): PotTimes | null {
  if (startsAt === null || !potLives(revision)) return null
  const temperatureC = warmerC(viscosity?.materialC ?? null, climate?.airC ?? null) ?? sheetTemperatureC(revision)
  const { potLifeMin, lateAfterMin, basis } = calculatePotLife({
    referenceMin: revision.potLifeMin ?? undefined,
    referenceC: revision.potLifeReferenceC ?? undefined,
    table: revision.potLifeTable ?? undefined,
    halvesPerC: revision.halvesPerC ?? undefined,
    temperatureC,
    lateFromPct: revision.lateFromPct,
    inductionMin: revision.inductionMin,
  })
  return { startsAt, lateAt: startsAt + minutesMs(lateAfterMin), endsAt: startsAt + minutesMs(potLifeMin), basis, potLifeMin, temperatureC }
}

function sheetTemperatureC({ potLifeReferenceC, potLifeTable }: MixRevision): string {
  const hottest = (potLifeTable ?? []).map(({ c }) => c).reduce<string | null>((most, c) => (most === null || new D(c).gt(most) ? c : most), null)
  const known = hottest ?? potLifeReferenceC
  if (known === null) throw new Error('a pot life without a temperature')
  return known
}

/** Whole milliseconds of decimal minutes, rounded down: a pot never lives longer for the rounding. */
export const minutesMs = (minutes: string): number => new D(minutes).times(minuteMs).floor().toNumber()

/** Chemistry of the base of a mix, or of its first component where none is called base; null of no mix. */
export const baseChemistryOf = (components: readonly { role: string; chemistry: string }[]): string | null =>
  (components.find(({ role }) => role === 'base') ?? components[0])?.chemistry ?? null
