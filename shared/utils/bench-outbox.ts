import { backoffMs } from './backoff'

/** Something that waits to be sent. It is written here first, online too, so that there is one path. */
export interface OutboxEntry {
  id: string
  /** What it is about: entries of one subject go in order. */
  subject: string
  kind: 'draft' | 'seal'
  method: 'PUT' | 'POST'
  path: string
  body: Record<string, unknown>
  /** Stored with the entry: a retry is the same request. */
  idempotencyKey: string | null
  createdAt: number
  tries: number
  /** Not before; epoch milliseconds. */
  nextAt: number
  /** Refused by the server: it does not go by itself any more. */
  refusal: { status: number, code: string, message: string, /** The field that is to blame. */ path?: string } | null
}

/** A newer draft takes the place of one that was not sent yet: only the latest is worth sending. */
export function withEntry(entries: readonly OutboxEntry[], entry: OutboxEntry, sendingId: string | null): OutboxEntry[] {
  if (entry.kind !== 'draft') return [...entries, entry]
  const kept = entries.filter(other => other.kind !== 'draft' || other.subject !== entry.subject || other.id === sendingId)
  return [...kept, entry].sort(draftsBeforeSeal)
}

/** Seals wait for their drafts; between subjects the order of writing stands. */
function draftsBeforeSeal(a: OutboxEntry, b: OutboxEntry): number {
  if (a.subject !== b.subject || a.kind === b.kind) return 0
  return a.kind === 'draft' ? -1 : 1
}

/** What to send now: the first of each subject that is due; a refused one holds back what comes after it. */
export function nextEntry(entries: readonly OutboxEntry[], now: number): OutboxEntry | null {
  const seen = new Set<string>()
  for (const entry of entries) {
    if (seen.has(entry.subject)) continue
    seen.add(entry.subject)
    if (entry.refusal === null && entry.nextAt <= now) return entry
  }
  return null
}

/** The next instant at which something falls due, or null while nothing waits. What stands behind another waits with it. */
export function nextDueAt(entries: readonly OutboxEntry[]): number | null {
  const first = entries.filter(({ subject }, place) => entries.findIndex(other => other.subject === subject) === place)
  const due = first.filter(({ refusal }) => refusal === null).map(({ nextAt }) => nextAt)
  return due.length === 0 ? null : Math.min(...due)
}

/**
 * A failure that will pass: the same request again, later.
 * @param random 0 to 1, so that the tablets of a shop do not all come back at once
 */
export function waited(entry: OutboxEntry, now: number, random: number): OutboxEntry {
  const tries = entry.tries + 1
  return { ...entry, tries, nextAt: now + backoffMs(tries, random) }
}

export function refused(entry: OutboxEntry, refusal: NonNullable<OutboxEntry['refusal']>): OutboxEntry {
  return { ...entry, tries: entry.tries + 1, refusal }
}

/** A weighing older than two minutes has happened: the server then stores it, also of a tin that it would refuse. With room for the way there. */
const FACT_AFTER_MS = 2 * 60_000 + 5_000

/** Grams of a tin that may not be poured are in the cup. They are sent again once they count as a fact. */
export const heldBack = (entry: OutboxEntry, now: number): OutboxEntry => ({ ...entry, tries: entry.tries + 1, nextAt: now + FACT_AFTER_MS })

/** Everything, or what is about one subject, is due at once, also what was refused. */
export function dueAgain(entries: readonly OutboxEntry[], subject?: string): OutboxEntry[] {
  return entries.map(entry => (subject === undefined || entry.subject === subject ? { ...entry, nextAt: 0, refusal: null } : entry))
}

/** Nobody is signed in any more: it waits for the next sign-in, it is not lost. */
export function passes(status: number): boolean {
  return status === 0 || status === 401 || status === 408 || status === 429 || status >= 500
}
