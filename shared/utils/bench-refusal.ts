import type { OutboxEntry } from './bench-outbox'
import type { BenchRun } from './bench-run'

/** What the server says when this tablet cannot go on with a batch by itself. */
export interface BenchRefusal {
  code: string
  message: string
  /** The lot that may not be poured, where that is why. */
  lotId: string | null
}

/** A tin that may not be poured: its grams stay, another tin or a foreman's word is needed. */
export const LOT_REFUSAL_CODES: ReadonlySet<string> = new Set(['lot-blocked', 'lot-expired'])
const STOPPING: ReadonlySet<string> = new Set(['taken-over', 'booth-clash', 'forbidden', 'code-not-yours', ...LOT_REFUSAL_CODES])

/** The refusal as the bench has to say it; null where the work goes on and the bar alone tells of it. */
export function refusalOf(entry: Pick<OutboxEntry, 'body'>, { code, message, path }: NonNullable<OutboxEntry['refusal']>): BenchRefusal | null {
  return STOPPING.has(code) ? { code, message, lotId: LOT_REFUSAL_CODES.has(code) ? lotAt(entry.body, path ?? '') : null } : null
}

/** The lot at `components.0.pours.1.lotId` of a draft. */
function lotAt(body: unknown, path: string): string | null {
  const found = path.split('.').reduce<unknown>((at, key) => (typeof at === 'object' && at !== null ? (at as Record<string, unknown>)[key] : undefined), body)
  return typeof found === 'string' ? found : null
}

/** Whether somebody has to be asked about it: a lot in the cup that was told of before is not told of again. */
export const isNews = (run: BenchRun, { lotId }: BenchRefusal): boolean => lotId === null || run.told?.includes(lotId) !== true

/** A batch that was laid aside on this tablet: the server did not take it from here, and grams of it were poured. */
export interface BenchAside {
  /** The batch's own id. */
  id: string
  run: BenchRun
  /** This tablet's turn at it. */
  turn: number
  /** Epoch milliseconds by the server's clock. */
  at: number
  refusal: Pick<BenchRefusal, 'code' | 'message'>
}

/** The server gives the number: the one that this bench had chosen belongs to somebody else. */
export const withoutNumber = (run: BenchRun): BenchRun => ({ ...run, code: null })
