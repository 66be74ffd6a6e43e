import { EngineError } from './error'
import { MINUTE_MS, earlier, later, readDuration, readInstant, wholePart } from './instants'
import type { OvercoatWindow } from './window-state'

/** First and last moment of one application. Instants are whole epoch milliseconds. */
export interface Sprayed {
  firstSprayedAt: number
  lastSprayedAt: number
}

interface WindowInput extends Sprayed {
  /** Earliest: counted from the **last** spray. */
  minMs: number
  /** Latest: counted from the **first** spray. Null: never. */
  maxMs: number | null
  /** To mix and spray what is still to be coated. */
  workLeftMs?: number | undefined
}

const CLOSING_AT_LEAST_MS = 5 * MINUTE_MS
const CLOSING_AT_MOST_MS = 30 * MINUTE_MS

/**
 * Opens = last sprayed + earliest, closes = first sprayed + latest. Closing begins at
 * latest − max(work left, 10 % of the window held between 5 and 30 min), never before the middle of the window.
 * @throws EngineError `spray-reversed`, and for instants and durations that are none
 */
export function overcoatWindow(input: WindowInput): OvercoatWindow {
  readSprayed(input)
  const opensAt = input.lastSprayedAt + readDuration(input.minMs, 'minMs')
  if (input.maxMs === null) return { opensAt, closesAt: null, closingAt: null, empty: false }
  const closesAt = input.firstSprayedAt + readDuration(input.maxMs, 'maxMs')
  const workLeftMs = readDuration(input.workLeftMs ?? 0, 'workLeftMs')
  return between(opensAt, closesAt, workLeftMs)
}

/** A window between two instants, with where its closing stretch begins. */
export function between(opensAt: number, closesAt: number, workLeftMs: number): OvercoatWindow {
  if (opensAt >= closesAt) return { opensAt, closesAt, closingAt: null, empty: true }
  const length = closesAt - opensAt
  const tenth = earlier(later(wholePart(length, 10), CLOSING_AT_LEAST_MS), CLOSING_AT_MOST_MS)
  const middle = opensAt + wholePart(length, 2)
  return { opensAt, closesAt, closingAt: later(closesAt - later(workLeftMs, tenth), middle), empty: false }
}

/** @throws EngineError `spray-reversed`, and for instants that are none */
export function readSprayed({ firstSprayedAt, lastSprayedAt }: Sprayed): void {
  readInstant(firstSprayedAt, 'firstSprayedAt')
  readInstant(lastSprayedAt, 'lastSprayedAt')
  if (lastSprayedAt < firstSprayedAt) {
    throw new EngineError('spray-reversed', 'lastSprayedAt', 'The last spray cannot be before the first')
  }
}
