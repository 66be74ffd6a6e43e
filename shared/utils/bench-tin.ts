import { D, print, sum } from '../engine/decimal'
import type { BenchLot, BenchSnapshot } from '../schemas/bench'
import { approvalsNeeded, lotRefusal, type Approvable } from './bench-lots'
import { componentAtHand, openPour, pouredG, poursOf, type BenchRun } from './bench-run'
import type { BenchPart, BenchTools } from './bench-tools'

/** A foreman's words for one tin: the approvals, and what each of them allows. */
export interface TinWord {
  approvals: readonly string[]
  faults: readonly Approvable[]
}

/** The tin is empty at the grams that stand: its lot is closed, the same weighing goes on from the next tin. */
export function canEmpty(run: BenchRun, nextLotId: string | null): BenchRun {
  const index = componentAtHand(run)
  if (index === null) return run
  const open = openPour(run)
  const closed = open === null ? run : { ...run, pours: [...run.pours, open] }
  return { ...closed, lots: run.lots.map((lot, place) => (place === index ? nextLotId : lot)) }
}

/** No more of the base is to be had: the mix becomes what the base in the cup allows, and the others follow it. */
export function takeWhatIsIn(run: BenchRun, index: number, totalG: string): BenchRun {
  const { areaM2: _area, totalG: _total, available: _available, ...rest } = run.plan
  const grams = pouredG(run, index)
  if (grams === null) return run
  return { ...run, plan: { ...rest, available: { index, grams } }, targetTotalG: totalG }
}

/**
 * Pours on from this tin, with a foreman's words where it needed them. What is in the cup came out of the tin before:
 * its lot is closed at these grams. The tin in hand itself may be allowed; then nothing is closed.
 */
export function takeTin(run: BenchRun, index: number, lotId: string, word: TinWord): BenchRun {
  const next = withWord(run, lotId, word)
  if (run.lots[index] === lotId) return next
  if (openPour(next) !== null) return canEmpty(next, lotId)
  return { ...next, lots: next.lots.map((lot, place) => (place === index ? lotId : lot)) }
}

/** A foreman's words for a tin of this batch, noted. */
export const withWord = (run: BenchRun, lotId: string, { approvals, faults }: TinWord): BenchRun => ({
  ...run,
  approvals: [...new Set([...run.approvals, ...approvals])],
  allowed: [...run.allowed ?? [], ...faults.map(fault => ({ lotId, fault }))],
})

/** What a foreman still has to allow before this tin is poured, those words left out that were given for this batch. */
export function wordsNeeded(run: BenchRun, lot: BenchLot, part: BenchPart, today: string): Approvable[] {
  return approvalsNeeded(lot, part.materialId, today, part.role)
    .filter(fault => run.allowed?.some(one => one.lotId === lot.id && one.fault === fault) !== true)
}

/** A tin that is refused by itself and may be poured for this batch: with a foreman's words, or the last of it that is in hand. */
export function isAllowed(run: BenchRun, lot: BenchLot, part: BenchPart, today: string): boolean {
  const refusal = lotRefusal(lot, part.materialId, today, part.role)
  if (refusal === 'empty') return run.lots[part.index] === lot.id
  return (refusal === 'blocked' || refusal === 'out-of-date') && wordsNeeded(run, lot, part, today).length === 0
}

/** A tin that may no longer be poured from, although it is in somebody's hand or its grams are in the cup. */
export interface TinHalt {
  lot: BenchLot
  part: BenchPart
  fault: Approvable | 'peroxide-out-of-date'
  /** Grams of this lot in the cup, of this component. */
  inCupG: string
}

/**
 * Why the tin in hand must not be poured from any more: it was blocked, or its date has passed, since it was taken. Null
 * where it may be, a foreman's word for it included.
 *
 * @param today the shop's calendar day, `YYYY-MM-DD`
 */
export function tinHalt(run: BenchRun, tools: BenchTools, snapshot: BenchSnapshot, today: string): TinHalt | null {
  const index = run.stage === 'pour' ? componentAtHand(run) : null
  const part = index === null ? undefined : tools.parts[index]
  const lot = index === null ? undefined : snapshot.lots.find(({ id }) => id === run.lots[index])
  if (part === undefined || lot === undefined) return null
  const isOldPeroxide = lotRefusal(lot, part.materialId, today, part.role) === 'peroxide-out-of-date'
  const fault = isOldPeroxide ? 'peroxide-out-of-date' : wordsNeeded(run, lot, part, today)[0]
  return fault === undefined ? null : { lot, part, fault, inCupG: gramsOfLot(run, lot.id) }
}

/** Grams of one lot in the cup; `0` where none is. */
export const gramsOfLot = (run: BenchRun, lotId: string): string =>
  print(sum(poursOf(run).filter(pour => pour.lotId === lotId).map(({ grams }) => new D(grams))))

/** What is wrong with a tin that was taken in hand, in plain words. */
export function haltWords({ lot, fault }: Pick<TinHalt, 'lot' | 'fault'>): string {
  if (fault === 'blocked') return `Lot ${lot.lotNumber} was blocked: ${lot.blockedReason ?? 'no reason given'}.`
  return `Lot ${lot.lotNumber} is past its use-by date.${fault === 'peroxide-out-of-date' ? ' Nobody can allow an old peroxide.' : ''}`
}

/** Somebody was told that this lot of the cup may no longer be poured, and goes on: its grams are a fact. */
export const toldOfLot = (run: BenchRun, lotId: string): BenchRun => ({ ...run, told: [...new Set([...run.told ?? [], lotId])] })
