import { D } from '#shared/engine/decimal'
import type { DraftBody } from '#shared/schemas/drafts'
import type { StockLot } from '../repositories/lot-stock'
import { ruleBroken } from '../utils/errors'
import { canHold, plansThisMix, pouredTotalOf, scaleInputOf } from './batch-sums'
import type { DraftReferences } from './draft-references'

/** A pour that was weighed longer ago than this has happened: it is recorded, and what was wrong is for a foreman. */
export const factAfterMs = 2 * 60_000

/**
 * What can never be true of a cup, at any time.
 *
 * @throws Refusal 422 `plan-not-the-mix`, `unknown-component`, `negative-grams`, `unknown-lot`, `lot-of-other-material`, `over-scale`
 */
export function refuseImpossible(body: DraftBody, { revision, lots, scale }: DraftReferences): void {
  if (!plansThisMix(revision, body.plan)) {
    throw broken('plan-not-the-mix', 'plan.mix', 'The plan is for another mix than the one named.')
  }
  body.components.forEach(({ index, pours }, place) => {
    const component = revision.components[index]
    if (!component) throw broken('unknown-component', `components.${place}.index`, 'The mix has no such component.')
    pours.forEach(({ lotId, grams }, pour) => {
      const path = `components.${place}.pours.${pour}`
      if (new D(grams).lt(0)) throw broken('negative-grams', `${path}.grams`, 'Grams poured cannot be below 0.')
      const lot = lots.get(lotId)
      if (!lot) throw broken('unknown-lot', `${path}.lotId`, 'This lot is not booked in.')
      if (lot.materialId !== component.materialId) {
        throw broken('lot-of-other-material', `${path}.lotId`, `Lot ${lot.lotNumber} is not ${component.materialName}.`)
      }
    })
  })
  if (!canHold(pouredTotalOf(body), scaleInputOf(scale, body.plan))) {
    throw broken('over-scale', 'components', 'That is more than this scale can hold.')
  }
}

/** Why a lot should not be poured. */
export type LotFault = 'expired-lot' | 'blocked-lot'

/** @param day the shop's calendar day of the pour, `YYYY-MM-DD`; a lot may be used through its last day */
export function lotFaultsOf(lot: StockLot, day: string): LotFault[] {
  const faults: LotFault[] = []
  if (lot.state === 'blocked') faults.push('blocked-lot')
  if (lot.expiresOn !== null && lot.expiresOn < day) faults.push('expired-lot')
  return faults
}

/** The approval that lifts a fault, or null where nobody can lift it: a peroxide past its date. */
export function approvalActionOf(fault: LotFault, lot: Pick<StockLot, 'materialRole'>): string | null {
  if (fault === 'blocked-lot') return 'use-blocked-lot'
  return lot.materialRole === 'peroxide' ? null : 'use-expired-lot'
}

/** A weighing that the stored draft does not hold yet. */
export interface NewPour {
  path: string
  lotId: string
  at: string
}

/** Weighings beyond those stored, component by component. */
export function newPoursOf(body: Pick<DraftBody, 'components'>, stored: Pick<DraftBody, 'components'> | null): NewPour[] {
  const known = (index: number) => stored?.components.find((component) => component.index === index)?.pours ?? []
  return body.components.flatMap(({ index, pours }, place) => pours.flatMap(({ lotId, at }, pour) =>
    known(index)[pour]?.lotId === lotId ? [] : [{ path: `components.${place}.pours.${pour}.lotId`, lotId, at }]))
}

/** Says no to a lot before it is poured, with the way out. */
export function refuseLot(fault: LotFault, lot: StockLot, path: string): never {
  const way = approvalActionOf(fault, lot) === null ? 'No one can approve a peroxide past its date: take another lot.' : 'Take another lot, or ask a foreman to approve it.'
  if (fault === 'blocked-lot') throw broken('lot-blocked', path, `Lot ${lot.lotNumber} is blocked. ${way}`)
  throw broken('lot-expired', path, `Lot ${lot.lotNumber} is past its use-by date. ${way}`)
}

const broken = (code: string, path: string, message: string) => ruleBroken(code, message, [{ path, message }])
