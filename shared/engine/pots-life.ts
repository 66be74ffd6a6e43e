import type { Dec } from './decimal'
import { print, readPositive, sum } from './decimal'
import { EngineError } from './error'
import { lateAfter } from './pot-life'
import { LONGEST_MINUTES, readMinutes, readWait } from './temperature'

/** How fast a pot is used up. Pace is m²/h with loading, turning and racking; flow alone is a lower bound of the time. */
export interface Pace {
  paceM2PerH: Dec | null
  flowGPerMin: Dec | null
}

export function readPace(input: { paceM2PerH?: string | undefined, gunFlowGPerMin?: string | undefined }): Pace {
  return {
    paceM2PerH: input.paceM2PerH === undefined ? null : readPositive(input.paceM2PerH, 'paceM2PerH', '100000'),
    flowGPerMin: input.gunFlowGPerMin === undefined ? null : readPositive(input.gunFlowGPerMin, 'gunFlowGPerMin', '100000'),
  }
}

/**
 * Minutes from the first spray of a pot until it is late: late-from share × pot life − induction − time from mixing
 * to first spray. Null for a mix without a pot life.
 * @throws EngineError `no-usable-life` where nothing is left
 */
export function usableMin(input: {
  potLifeMin?: string | undefined
  lateFromPct?: string | undefined
  inductionMin?: string | undefined
  mixToSprayMin?: string | undefined
}): Dec | null {
  const induction = readWait(input.inductionMin ?? '0', 'inductionMin')
  const mixToSpray = readWait(input.mixToSprayMin ?? '0', 'mixToSprayMin')
  if (input.potLifeMin === undefined) return null
  const usable = lateAfter(readMinutes(input.potLifeMin, 'potLifeMin'), input.lateFromPct)
    .minus(induction).minus(mixToSpray)
  if (usable.lte(0)) {
    throw new EngineError('no-usable-life', 'potLifeMin', 'The pot would be late before it could be sprayed')
  }
  return usable
}

/** Minutes to spray an area once at a pace in m²/h. */
function sprayTimeMin(areaM2: Dec, paceM2PerH: Dec): Dec {
  return areaM2.times(60).div(paceM2PerH)
}

/**
 * Minutes of work on an area at a pace with loading, turning and racking. Plain decimals.
 * @throws EngineError `work-too-long` above ten years
 */
export function workMinutes(areaM2: string, paceM2PerH: string): string {
  const minutes = sprayTimeMin(readPositive(areaM2, 'areaM2'), readPositive(paceM2PerH, 'paceM2PerH', '100000'))
  if (minutes.gt(LONGEST_MINUTES)) {
    throw new EngineError('work-too-long', 'areaM2', 'At this pace the work would take more than ten years')
  }
  return print(minutes)
}

/**
 * Minutes from the first to the last spray of one pot. Several coats from one pot: each begins an interval after the
 * one before began, or when that is done. Null while neither pace nor flow is known.
 */
export function spanMin(pace: Pace, areaM2: Dec, grams: Dec, coats: number, intervalMin: Dec): Dec | null {
  const oneCoat = oneCoatMin(pace, areaM2, grams.div(coats))
  if (oneCoat === null) return null
  const step = oneCoat.gt(intervalMin) ? oneCoat : intervalMin
  return step.times(coats - 1).plus(oneCoat)
}

function oneCoatMin({ paceM2PerH, flowGPerMin }: Pace, areaM2: Dec, grams: Dec): Dec | null {
  if (paceM2PerH !== null) return sprayTimeMin(areaM2, paceM2PerH)
  return flowGPerMin === null ? null : grams.div(flowGPerMin)
}

/** Measured pace of past batches: Σ area ÷ Σ time, m²/h. Null without a measured batch. */
export function measuredPaceM2PerH(batches: readonly { areaM2: string, minutes: string }[]): string | null {
  if (batches.length === 0) return null
  const area = sum(batches.map(({ areaM2 }, index) => readPositive(areaM2, `batches.${index}.areaM2`)))
  const minutes = sum(batches.map((batch, index) => readPositive(batch.minutes, `batches.${index}.minutes`)))
  return print(area.times(60).div(minutes))
}
