import { D } from '../engine/decimal'
import type { BenchLot, BenchSnapshot } from '../schemas/bench'

/** Why a lot is not poured; null where it may be. */
type LotRefusal = 'wrong-material' | 'out-of-date' | 'empty' | 'unknown'

/** Lots of a material that may be poured, the one that expires first in front; those without a date last. */
export function offeredLots(snapshot: BenchSnapshot, materialId: string, today: string): BenchLot[] {
  return snapshot.lots
    .filter(lot => lotRefusal(lot, materialId, today) === null)
    .sort((a, b) => (a.expiresOn ?? '9999').localeCompare(b.expiresOn ?? '9999'))
}

/**
 * Whether a lot may go into this component.
 * @param today the shop's calendar day, `YYYY-MM-DD`; a lot may still be used on its last day
 */
export function lotRefusal(lot: BenchLot | undefined, materialId: string, today: string): LotRefusal | null {
  if (lot === undefined) return 'unknown'
  if (lot.materialId !== materialId) return 'wrong-material'
  if (lot.expiresOn !== null && lot.expiresOn < today) return 'out-of-date'
  return new D(lot.stockG).lte(0) ? 'empty' : null
}

/** Fewer days than this and a lot runs out soon. */
const SOON_DAYS = 14
const DAY_MS = 86_400_000

/** True in the last fourteen days of a lot. */
export function runsOutSoon(lot: BenchLot, today: string): boolean {
  return lot.expiresOn !== null && Date.parse(lot.expiresOn) - Date.parse(today) <= SOON_DAYS * DAY_MS
}

/** What a refused lot is told, and what to do about it. */
export const LOT_REFUSALS: Record<LotRefusal, string> = {
  'wrong-material': 'That tin is another material. Take one of these, or stop this mix.',
  'out-of-date': 'That lot is out of date. Take a fresh one; using it needs a foreman.',
  'empty': 'That lot is used up in the stock list. Take another, or have its stock put right.',
  'unknown': 'No lot of this number may be poured: it is out of date, blocked or not booked in. Take one of these.',
}

/** A lot by the number on the tin, in whatever case it was typed. */
export function lotByNumber(snapshot: BenchSnapshot, text: string): BenchLot | undefined {
  const wanted = text.trim().toLowerCase()
  return snapshot.lots.find(({ lotNumber }) => lotNumber.toLowerCase() === wanted)
}

/** The first lot offered of each component, in the mix's order; null where there is none. */
export function firstLots(snapshot: BenchSnapshot, materialIds: readonly string[], today: string): (string | null)[] {
  return materialIds.map(materialId => offeredLots(snapshot, materialId, today)[0]?.id ?? null)
}
