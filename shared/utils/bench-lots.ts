import type { BenchLot, BenchSnapshot } from '../schemas/bench'
import { isMoreThanNone } from './decimal-text'

/** Why a lot is not poured; null where it may be. */
type LotRefusal = 'wrong-material' | 'blocked' | 'out-of-date' | 'peroxide-out-of-date' | 'empty' | 'unknown'

/** What a foreman can allow, and the word for it. */
export const LOT_APPROVALS = { 'blocked': 'use-blocked-lot', 'out-of-date': 'use-expired-lot' } as const
export type Approvable = keyof typeof LOT_APPROVALS

/** Lots of a material that may be poured, the one that expires first in front; those without a date last. */
export function offeredLots(snapshot: BenchSnapshot, materialId: string, today: string): BenchLot[] {
  return snapshot.lots
    .filter(lot => lotRefusal(lot, materialId, today) === null)
    .sort(firstExpiringFirst)
}

/** Every lot of a material with something in it: those on offer, then those that are refused, each first-expiring-first. */
export function listedLots(snapshot: BenchSnapshot, materialId: string, today: string): BenchLot[] {
  const refused = snapshot.lots.filter(lot => lot.materialId === materialId && lotRefusal(lot, materialId, today) !== null && isMoreThanNone(lot.stockG))
  return [...offeredLots(snapshot, materialId, today), ...refused.sort(firstExpiringFirst)]
}

const firstExpiringFirst = (a: BenchLot, b: BenchLot): number => (a.expiresOn ?? '9999').localeCompare(b.expiresOn ?? '9999')

/**
 * Whether a lot may go into this component.
 * @param today the shop's calendar day, `YYYY-MM-DD`; a lot may still be used on its last day
 * @param role of the component: a peroxide past its date is never poured
 */
export function lotRefusal(lot: BenchLot | undefined, materialId: string, today: string, role?: string): LotRefusal | null {
  if (lot === undefined) return 'unknown'
  if (lot.materialId !== materialId) return 'wrong-material'
  const isOutOfDate = lot.expiresOn !== null && lot.expiresOn < today
  if (isOutOfDate && role === 'peroxide') return 'peroxide-out-of-date'
  if (lot.state === 'blocked') return 'blocked'
  if (isOutOfDate) return 'out-of-date'
  return isMoreThanNone(lot.stockG) ? null : 'empty'
}

/** What a foreman has to allow before this lot is poured, in order; empty where nothing has to be or nobody can. */
export function approvalsNeeded(lot: BenchLot, materialId: string, today: string, role: string): Approvable[] {
  const refusal = lotRefusal(lot, materialId, today, role)
  if (refusal !== 'blocked' && refusal !== 'out-of-date') return []
  const isOutOfDate = lot.expiresOn !== null && lot.expiresOn < today
  return [...(lot.state === 'blocked' ? ['blocked' as const] : []), ...(isOutOfDate ? ['out-of-date' as const] : [])]
}

/** Fewer days than this and a lot runs out soon. */
const SOON_DAYS = 14
const DAY_MS = 86_400_000

/** True in the last fourteen days of a lot. */
export function runsOutSoon(lot: BenchLot, today: string): boolean {
  return lot.expiresOn !== null && Date.parse(lot.expiresOn) - Date.parse(today) <= SOON_DAYS * DAY_MS
}

/** What a refused lot is told, and what to do about it. */
const LOT_REFUSALS: Record<LotRefusal, string> = {
  'wrong-material': 'That tin is another material. Take one of these, or stop this mix.',
  'blocked': 'That lot is blocked. Take another; using it needs a foreman.',
  'out-of-date': 'That lot is out of date. Take a fresh one; using it needs a foreman.',
  'peroxide-out-of-date': 'That peroxide is out of date. Nobody can allow it: take a fresh one.',
  'empty': 'That lot is used up in the stock list. Take another, or have its stock put right.',
  'unknown': 'No lot of this number is booked in. Read the number on the tin again, or take one of these.',
}

/**
 * A lot by the number on the tin, in whatever case it was typed. Two makers may number alike: of those the one of the
 * material that is asked for, else any, which is then told to be another material.
 */
export function lotByNumber(snapshot: BenchSnapshot, text: string, materialId?: string): BenchLot | undefined {
  const wanted = text.trim().toLowerCase()
  const found = snapshot.lots.filter(({ lotNumber }) => lotNumber.toLowerCase() === wanted)
  return found.find(lot => lot.materialId === materialId) ?? found[0]
}

/** Why a tin is not taken; one of another material is told what it is. */
export function lotRefusalWords(refusal: LotRefusal, lot: BenchLot | undefined, materials: BenchSnapshot['materials']): string {
  const material = materials.find(({ id }) => id === lot?.materialId)
  if (refusal !== 'wrong-material' || lot === undefined || material === undefined) return LOT_REFUSALS[refusal]
  return `Lot ${lot.lotNumber} is ${material.code} ${material.name}. ${LOT_REFUSALS[refusal]}`
}

/** The first lot offered of each component, in the mix's order; null where there is none. */
export function firstLots(snapshot: BenchSnapshot, materialIds: readonly string[], today: string): (string | null)[] {
  return materialIds.map(materialId => offeredLots(snapshot, materialId, today)[0]?.id ?? null)
}
