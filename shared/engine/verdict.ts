import type { Dec } from './decimal'
import { ofPercent } from './decimal'

/** Guarded decision on one reading. `cannot-tell`: the scale cannot decide between in and out. */
export type Verdict = 'short' | 'in-tolerance' | 'too-much' | 'cannot-tell'

/** The allowed band of one component, in grams on the scale's division or as reckoned. */
export interface Band {
  targetG: Dec
  lowG: Dec
  highG: Dec
}

/** Whether a scale can judge a component of this size. */
export type Fitness = 'fine' | 'coarse' | 'too-small'

/**
 * target ± tolerance. A range reaches up to its high end where that lies above the tolerance.
 * @param highTargetG target at the range's upper end, null without a range
 */
export function bandOf(targetG: Dec, tolerancePct: Dec, highTargetG: Dec | null = null): Band {
  const toleranceG = targetG.times(ofPercent(tolerancePct))
  const withTolerance = targetG.plus(toleranceG)
  return {
    targetG,
    lowG: targetG.minus(toleranceG),
    highG: highTargetG !== null && highTargetG.gt(withTolerance) ? highTargetG : withTolerance,
  }
}

/**
 * In tolerance only where even a reading that is off by u would be; short or too much only where it would be too.
 * Guard band after JCGM 106.
 */
export function judge(pouredG: Dec, band: Band, uncertaintyG: Dec): Verdict {
  const least = pouredG.minus(uncertaintyG)
  const most = pouredG.plus(uncertaintyG)
  if (least.gte(band.lowG) && most.lte(band.highG)) return 'in-tolerance'
  if (most.lt(band.lowG)) return 'short'
  if (least.gt(band.highG)) return 'too-much'
  return 'cannot-tell'
}

/** `too-small` where u is more than the tolerance, `coarse` where it is more than a third of it. */
export function fitnessOf(targetG: Dec, tolerancePct: Dec, uncertaintyG: Dec): Fitness {
  const toleranceG = targetG.times(ofPercent(tolerancePct))
  if (uncertaintyG.gt(toleranceG)) return 'too-small'
  return uncertaintyG.times(3).gt(toleranceG) ? 'coarse' : 'fine'
}
