import type { DraftBody, DraftNote } from '#shared/schemas/drafts'

/** A tablet's clock may be ahead by this much without anybody minding, in milliseconds. */
const toleratedAheadMs = 2 * 60_000

/** What happened longer ago than this is a late entry, in milliseconds. */
export const lateEntryMs = 7 * 86_400_000

export interface CorrectedInstant {
  /** Epoch milliseconds, never after now. */
  at: number
  note: Extract<DraftNote, 'clock-ahead' | 'clock-far-ahead' | 'late-entry'> | null
}

/**
 * The moment at which the cup became reactive, by the server's clock. A tablet's own reading is moved by the measured
 * offset; without one, by what its clock showed when it sent this. What lies ahead is set to now.
 *
 * @param now epoch milliseconds
 * @returns null when the cup is not reactive yet
 */
export function correctedReactiveAt(body: Pick<DraftBody, 'reactiveAt' | 'device'>, now: number): CorrectedInstant | null {
  const { device, reactiveAt } = body
  if (device?.reactiveAt) {
    const offset = device.offsetMs ?? now - Date.parse(device.sentAt)
    return clamp(Date.parse(device.reactiveAt) + offset, now)
  }
  return reactiveAt === null ? null : clamp(Date.parse(reactiveAt), now)
}

/** An instant that a client gave, never after now. Epoch milliseconds. */
export const notAfter = (at: string, now: number): number => Math.min(Date.parse(at), now)

function clamp(at: number, now: number): CorrectedInstant {
  if (at > now) return { at: now, note: at - now > toleratedAheadMs ? 'clock-far-ahead' : 'clock-ahead' }
  // A tablet whose clock stands before 1970 tells nothing; the column cannot hold it either.
  return { at: Math.max(at, 0), note: now - at > lateEntryMs ? 'late-entry' : null }
}
