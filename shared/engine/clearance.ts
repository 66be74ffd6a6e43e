import { EngineError } from './error'
import { MINUTE_MS, later, readDuration, readInstant } from './instants'

/** Where no clearance time was measured: 30 min (HSE advice for an open workshop). A booth's own measured time wins. */
export const UNMEASURED_CLEARANCE_MS = 30 * MINUTE_MS

/** From `at` on the extraction runs, stands, or nobody knows. Instants are whole epoch milliseconds. */
export interface ExtractionChange {
  at: number
  extraction: 'running' | 'stopped' | 'unknown'
}

export interface ClearanceInput {
  /** Last shot of an isocyanate mix, or the end of cleaning the gun after it. */
  lastShotAt: number
  /** Measured for this booth; null: not measured. */
  clearanceMs: number | null
  /** In order. */
  changes: readonly ExtractionChange[]
  now: number
}

export interface Clearance {
  /** `stopped`: the count rests because extraction is off or unknown, and begins anew when it runs. */
  state: 'counting' | 'stopped' | 'clear'
  /** When nobody needs air-fed protection any more; null while the count rests. */
  clearAt: number | null
  remainingMs: number
}

/**
 * How long nobody may enter without air-fed mask: the clearance time with the extraction running without a break since
 * the last shot. A stop restarts it.
 * @throws EngineError `changes-order`
 */
export function clearanceOf(input: ClearanceInput): Clearance {
  const lastShotAt = readInstant(input.lastShotAt, 'lastShotAt')
  const needed = input.clearanceMs === null ? UNMEASURED_CLEARANCE_MS : readDuration(input.clearanceMs, 'clearanceMs')
  checkOrder(input.changes)
  const past = input.changes.filter(({ at }) => at <= input.now)
  let runningSince: number | null = null
  for (const { at, extraction } of past) {
    if (runningSince !== null && cleared(runningSince, at, lastShotAt, needed)) break
    if (extraction !== 'running') runningSince = null
    else runningSince ??= at
  }
  if (runningSince === null) return { state: 'stopped', clearAt: null, remainingMs: needed }
  const clearAt = later(runningSince, lastShotAt) + needed
  if (input.now >= clearAt) return { state: 'clear', clearAt, remainingMs: 0 }
  return { state: 'counting', clearAt, remainingMs: clearAt - input.now }
}

/** Once clear it stays so: extraction may be switched off afterwards. */
function cleared(runningSince: number, until: number, lastShotAt: number, needed: number): boolean {
  return until >= later(runningSince, lastShotAt) + needed
}

function checkOrder(changes: readonly ExtractionChange[]): void {
  changes.forEach(({ at }, index) => {
    const before = changes[index - 1]
    if (readInstant(at, `changes.${index}.at`) < (before?.at ?? 0)) {
      throw new EngineError('changes-order', `changes.${index}.at`, 'Changes of the extraction follow each other in time')
    }
  })
}
