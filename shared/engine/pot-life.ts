import type { Dec } from './decimal'
import { D, ZERO, ofPercent, print, readDecimal, readNonNegative, readPercent, readPositive } from './decimal'
import { EngineError } from './error'
import type { Mix } from './mix'
import type { TemperatureRow } from './temperature'
import { halvingRule, readCelsius, readMinutes, readTable, readWait, valueAt } from './temperature'

/** A sheet's value at its temperature, or its table. Decimals are plain strings. */
export interface PotLifeInput {
  referenceMin?: string | undefined
  referenceC?: string | undefined
  /** Wins over the single value and over the rule. */
  table?: readonly TemperatureRow[] | undefined
  /** °C that halve the pot life; 10 where not given. */
  halvesPerC?: string | undefined
  /** The warmer of material and air: {@link warmerC}. */
  temperatureC: string
  /** Share of the life after which a pot is late, per cent; 75 where not given. */
  lateFromPct?: string | undefined
  /** Standing time before the first spray. */
  inductionMin?: string | undefined
}

/** `sheet`: its own value; `table`: on or between its rows; `held`: colder, not lengthened; `rule`: halved. */
type PotLifeBasis = 'sheet' | 'table' | 'held' | 'rule'

export interface PotLifeAnswer {
  potLifeMin: string
  lateAfterMin: string
  /** Late-from less standing time. Negative where a pot would be late before it may be sprayed. */
  usableMin: string
  basis: PotLifeBasis
}

interface PotLife {
  minutes: Dec
  basis: PotLifeBasis
}

/** 75 %: a published eight-hour pot life is "ideally used in six hours" (TM 55-1500-345-23). */
const DEFAULT_LATE_FROM_PCT = '75'
/** Halves per +10 °C (UFGS 09971 §3.7.1.3). A sheet's own table wins. */
export const DEFAULT_HALVES_PER_C = '10'

/**
 * Pot life at a temperature. Between rows of a table log-linear, above the hottest the halving rule from that row,
 * below the coldest held. A single value halves above its temperature and is never lengthened below it.
 * @throws EngineError `pot-life-missing`, `table-…`
 */
function readPotLife(input: Omit<PotLifeInput, 'lateFromPct' | 'inductionMin'>): PotLife {
  const temperatureC = readCelsius(input.temperatureC, 'temperatureC')
  const stepC = readPositive(input.halvesPerC ?? DEFAULT_HALVES_PER_C, 'halvesPerC', '100')
  if (input.table !== undefined) {
    const { minutes, from } = valueAt(readTable(input.table, 'table'), temperatureC, stepC, 'hold', 'rule')
    return { minutes, basis: from }
  }
  if (input.referenceMin === undefined || input.referenceC === undefined) {
    throw new EngineError('pot-life-missing', 'referenceMin', 'Give the sheet\'s pot life with its temperature, or its table')
  }
  const minutes = readMinutes(input.referenceMin, 'referenceMin')
  const referenceC = readCelsius(input.referenceC, 'referenceC')
  if (temperatureC.eq(referenceC)) return { minutes, basis: 'sheet' }
  if (temperatureC.lt(referenceC)) return { minutes, basis: 'held' }
  return { minutes: halvingRule(minutes, referenceC, temperatureC, stepC), basis: 'rule' }
}

/** The answer of `POST /api/calculations/pot-life`. */
export function calculatePotLife(input: PotLifeInput): PotLifeAnswer {
  const { minutes, basis } = readPotLife(input)
  const inductionMin = readWait(input.inductionMin ?? '0', 'inductionMin')
  const lateAfterMin = lateAfter(minutes, input.lateFromPct)
  return {
    potLifeMin: print(minutes),
    lateAfterMin: print(lateAfterMin),
    usableMin: print(lateAfterMin.minus(inductionMin)),
    basis,
  }
}

/** Minutes from the start of a pot life until the pot is late. */
export function lateAfter(potLifeMin: Dec, lateFromPct: string = DEFAULT_LATE_FROM_PCT): Dec {
  return potLifeMin.times(ofPercent(readPercent(lateFromPct, 'lateFromPct', true)))
}

/** The warmer of material and air decides; with only one known, that one. */
export function warmerC(materialC: string | null, airC: string | null): string | null {
  if (materialC === null || airC === null) return materialC ?? airC
  return readCelsius(materialC, 'materialC').gt(readCelsius(airC, 'airC')) ? materialC : airC
}

/** One stable weight of one component. `at`: epoch milliseconds. */
export interface StablePour {
  index: number
  grams: string
  at: number
}

/**
 * When the pot life starts: the first stable gram at which a reactive component and another one are together.
 * Null while they are not, and for a mix without a reactive component.
 */
export function potLifeStart(mix: Mix, pours: readonly StablePour[]): number | null {
  const inOrder = pours
    .filter(({ grams }, index) => readNonNegative(grams, `pours.${index}.grams`).gt(ZERO))
    .sort((a, b) => a.at - b.at)
  const seen = new Set<number>()
  for (const { index, at } of inOrder) {
    seen.add(index)
    if (seen.size > 1 && mix.components.some(component => component.reactive && seen.has(component.index))) return at
  }
  return null
}

/** A mixture ends with its oldest part: adding to an old pot never restarts it. `ends` must not be empty. */
export function oldestEnd(ends: readonly number[]): number {
  return ends.reduce((first, end) => (end < first ? end : first))
}

export type LeftoverRefusal = 'other-mix' | 'life-up' | 'over-share' | 'sheet-says-no'

/**
 * Whether a leftover may go into a fresh pot: only of the same mix, while it lives, up to the sheet's share of the
 * fresh grams. The mixture keeps the leftover's end. Null: it may.
 * @param maxSharePct per cent of the fresh grams; null where the sheet does not allow it
 */
export function leftoverRefusal(input: {
  sameMixRevision: boolean
  leftoverG: string
  freshG: string
  maxSharePct: string | null
  leftoverEndsAt: number
  now: number
}): LeftoverRefusal | null {
  if (!input.sameMixRevision) return 'other-mix'
  if (input.now >= input.leftoverEndsAt) return 'life-up'
  if (input.maxSharePct === null) return 'sheet-says-no'
  const most = readPositive(input.freshG, 'freshG').times(ofPercent(readPercent(input.maxSharePct, 'maxSharePct')))
  return readPositive(input.leftoverG, 'leftoverG').gt(most) ? 'over-share' : null
}

export type PotLifeCaution = 'big-pot' | 'damp-air'

/**
 * What shortens a pot life without a number for it. Limits: common practice, no source.
 * @param limits grams of one pot and per cent of relative humidity from which to warn
 */
export function potLifeCautions(
  { totalG, rhPct }: { totalG: string, rhPct: string | null },
  limits: { bigPotG: string, dampRhPct: string } = { bigPotG: '5000', dampRhPct: '75' },
): PotLifeCaution[] {
  const cautions: PotLifeCaution[] = []
  if (readNonNegative(totalG, 'totalG').gte(limits.bigPotG)) cautions.push('big-pot')
  if (rhPct !== null && readDecimal(rhPct, 'rhPct', { min: ZERO, max: new D(100) }).gte(limits.dampRhPct)) {
    cautions.push('damp-air')
  }
  return cautions
}
