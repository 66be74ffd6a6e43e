import { overcoatWindow } from '#shared/engine/window'
import type { OvercoatWindow } from '#shared/engine/window-state'
import type { JobStep } from '../repositories/draft-references'
import { minutesMs } from './batch-sums'

/** What has to happen next for which a window opens. */
type WindowPurpose = 'coat-interval' | 'overcoat' | 'sand'

export interface CoatWindow {
  purpose: WindowPurpose
  window: OvercoatWindow
  /** The schedule's times that it follows from, milliseconds; `maxMs` null: it never closes. */
  minMs: number
  maxMs: number | null
}

type StepTimes = Pick<JobStep, 'coats' | 'coatIntervalMinMin' | 'coatIntervalMaxMin' | 'overcoatFromMin' | 'overcoatUntilMin' | 'sandFromMin' | 'sandUntilMin'>

/**
 * The window that a coat opens: to the next coat of the same step while there are some to come, else to the overcoat,
 * else to sanding. Instants are epoch milliseconds.
 *
 * @param coatNumber how many coats of the step lie on the pieces now
 * @returns null where the schedule gives no time
 */
export function windowAfter(step: StepTimes, coatNumber: number, firstSprayedAt: number, lastSprayedAt: number): CoatWindow | null {
  const next = nextTimes(step, coatNumber)
  if (next === null) return null
  const { purpose, min, max } = next
  const [minMs, maxMs] = [minutesMs(min), max === null ? null : minutesMs(max)]
  return { purpose, window: overcoatWindow({ firstSprayedAt, lastSprayedAt, minMs, maxMs }), minMs, maxMs }
}

function nextTimes(step: StepTimes, coatNumber: number): { purpose: WindowPurpose; min: string; max: string | null } | null {
  if (coatNumber < step.coats && step.coatIntervalMinMin !== null) {
    return { purpose: 'coat-interval', min: step.coatIntervalMinMin, max: step.coatIntervalMaxMin }
  }
  if (step.overcoatFromMin !== null) return { purpose: 'overcoat', min: step.overcoatFromMin, max: step.overcoatUntilMin }
  if (step.sandFromMin !== null) return { purpose: 'sand', min: step.sandFromMin, max: step.sandUntilMin }
  return null
}
