import type { Dec } from './decimal'
import { readDecimal, readPositive } from './decimal'
import { EngineError } from './error'
import { lateAfter } from './pot-life'
import { readMinutes, readWait } from './temperature'

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
export function sprayTimeMin(areaM2: Dec, paceM2PerH: Dec): Dec {
  return areaM2.times(60).div(paceM2PerH)
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
export function measuredPaceM2PerH(batches: readonly { areaM2: string, minutes: string }[]): Dec | null {
  if (batches.length === 0) return null
  const area = batches.reduce<Dec | null>((total, { areaM2 }, index) => {
    const one = readPositive(areaM2, `batches.${index}.areaM2`)
    return total === null ? one : total.plus(one)
  }, null)
  const minutes = batches.reduce<Dec | null>((total, batch, index) => {
    const one = readDecimal(batch.minutes, `batches.${index}.minutes`, { above: '0' })
    return total === null ? one : total.plus(one)
  }, null)
  return area === null || minutes === null ? null : area.times(60).div(minutes)
}
