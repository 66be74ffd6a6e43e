import type { Dec } from './decimal'
import { D, ONE, ZERO, readPositive } from './decimal'
import { EngineError } from './error'

export type OimlClass = 'I' | 'II' | 'III' | 'IIII'

/** A scale's record. Decimals are plain strings in grams. */
export interface ScaleInput {
  /** Smallest step the display shows, d. */
  divisionG: string
  capacityG?: string | undefined
  /** Maximum permissible error of the record, the same at every load. */
  mpeG?: string | undefined
  /** With `verificationIntervalG`: the error follows OIML R 76 and grows with the load. */
  oimlClass?: OimlClass | undefined
  /** The verification scale interval, e. */
  verificationIntervalG?: string | undefined
}

/** How a component is weighed: tared to zero before it, or read off the running total. */
export type Weighing = 'tared' | 'running'

export interface Scale {
  divisionG: Dec
  capacityG: Dec | null
  mpeG: Dec | null
  oiml: { oimlClass: OimlClass, intervalG: Dec } | null
}

/** Upper ends of the bands of 0.5 e, 1 e and 1.5 e, in e. OIML R 76-1 Table 6. */
const OIML_BANDS: Record<OimlClass, readonly [number, number, number | null]> = {
  I: [50_000, 200_000, null],
  II: [5_000, 20_000, 100_000],
  III: [500, 2_000, 10_000],
  IIII: [50, 200, 1_000],
}
const OIML_ERRORS = ['0.5', '1', '1.5'] as const

/** Upper ends in divisions and acceptance tolerances of class III, NIST Handbook 44 Table 6. */
const HANDBOOK_44_BANDS: readonly (readonly [upTo: number, tolerance: string])[] = [
  [500, '0.5'], [2_000, '1'], [4_000, '1.5'], [10_000, '2.5'],
]

/**
 * A field of the record in an input that spells it out: `divisionG` → `scaleDivisionG`.
 */
function flatPath(name: string): string {
  return `scale${name.charAt(0).toUpperCase()}${name.slice(1)}`
}

/** @throws EngineError for a division, capacity or error that is not positive, or a class without its interval */
export function readScale(input: ScaleInput): Scale {
  const optional = (text: string | undefined, name: string): Dec | null =>
    text === undefined ? null : readPositive(text, flatPath(name))
  const intervalG = optional(input.verificationIntervalG, 'verificationIntervalG')
  if (input.oimlClass !== undefined && intervalG === null) {
    throw new EngineError('interval-missing', flatPath('verificationIntervalG'), 'A class needs its verification interval e')
  }
  return {
    divisionG: readPositive(input.divisionG, flatPath('divisionG')),
    capacityG: optional(input.capacityG, 'capacityG'),
    mpeG: optional(input.mpeG, 'mpeG'),
    oiml: input.oimlClass === undefined || intervalG === null ? null : { oimlClass: input.oimlClass, intervalG },
  }
}

/**
 * Maximum permissible error in grams, OIML R 76-1 Table 6; in service twice the initial one.
 * @throws EngineError `over-scale-range` above the class's last band
 */
export function oimlMpeG(oimlClass: OimlClass, intervalG: Dec, loadG: Dec, inService: boolean): Dec {
  const intervals = loadG.div(intervalG)
  const band = OIML_BANDS[oimlClass].findIndex(upTo => upTo === null || intervals.lte(upTo))
  const error = OIML_ERRORS[band]
  if (error === undefined) {
    throw new EngineError('over-scale-range', 'scale', 'The load is above what this class of scale may weigh')
  }
  return intervalG.times(error).times(inService ? 2 : 1)
}

/** False above the last band of the scale's class, where it must not weigh, and above its capacity. */
export function canWeigh(scale: Scale, loadG: Dec): boolean {
  if (scale.capacityG !== null && loadG.gt(scale.capacityG)) return false
  if (scale.oiml === null) return true
  const last = OIML_BANDS[scale.oiml.oimlClass][2]
  return last === null || loadG.div(scale.oiml.intervalG).lte(last)
}

/**
 * Tolerance of a class III scale in divisions, NIST Handbook 44; maintenance is twice acceptance.
 * @throws EngineError `over-scale-range` above 10 000 divisions
 */
export function handbook44ToleranceD(loadDivisions: Dec, maintenance: boolean): Dec {
  const band = HANDBOOK_44_BANDS.find(([upTo]) => loadDivisions.lte(upTo))
  if (band === undefined) {
    throw new EngineError('over-scale-range', 'scale', 'The load is above what this class of scale may weigh')
  }
  return new D(band[1]).times(maintenance ? 2 : 1)
}

/**
 * How far a reading may be from the truth: u = d/2 + the scale's permissible error, where its record has one;
 * twice that for a component read off a running total, because two readings make it.
 */
export function readingUncertaintyG(scale: Scale, loadG: Dec, weighing: Weighing = 'tared'): Dec {
  const error = scale.oiml === null
    ? scale.mpeG ?? ZERO
    : oimlMpeG(scale.oiml.oimlClass, scale.oiml.intervalG, loadG, true)
  const once = scale.divisionG.times('0.5').plus(error)
  return once.times(weighing === 'running' ? 2 : ONE)
}

/** A pot's limits. Decimals are plain strings. */
export interface PotLimitInput {
  cupCapacityG?: string | undefined
  cupCapacityMl?: string | undefined
  /** How far the cup may be filled, per cent of its capacity; 100 where not given. */
  fillLinePct?: string | undefined
  /** Weight of the empty cup: it stands on the scale too. */
  cupTareG?: string | undefined
}

/**
 * The most grams that a pot may hold: cup (g, or mL with the mix's density) up to its fill line, and what the scale
 * still carries beside the cup. Null where nothing bounds it.
 * @throws EngineError `density-missing` for a cup in mL with an unknown density, `cup-over-scale`
 */
export function potLimitG(input: PotLimitInput, scale: Scale, densityGPerMl: Dec | null): Dec | null {
  const fill = readPositive(input.fillLinePct ?? '100', 'fillLinePct', '100').div(100)
  const limits: Dec[] = []
  if (input.cupCapacityG !== undefined) {
    limits.push(readPositive(input.cupCapacityG, 'cupCapacityG').times(fill))
  }
  if (input.cupCapacityMl !== undefined) {
    if (densityGPerMl === null) {
      throw new EngineError('density-missing', 'cupCapacityMl', 'A cup in mL needs the density of every component')
    }
    limits.push(readPositive(input.cupCapacityMl, 'cupCapacityMl').times(densityGPerMl).times(fill))
  }
  if (scale.capacityG !== null) {
    const left = scale.capacityG.minus(input.cupTareG === undefined ? ZERO : readPositive(input.cupTareG, 'cupTareG'))
    if (left.lte(0)) throw new EngineError('cup-over-scale', 'cupTareG', 'The empty cup is more than the scale carries')
    limits.push(left)
  }
  return limits.length === 0 ? null : limits.reduce((least, limit) => (limit.lt(least) ? limit : least))
}
