import { D, sum } from '#shared/engine/decimal'
import { pourFieldOf } from '#shared/schemas/amendments'
import { amendRefusal } from '#shared/utils/amend-rights'
import { shopDate } from '#shared/utils/zone'
import type { BatchOnRecord } from '../repositories/batch-record'
import { isThere } from '../repositories/draft-references'
import { findStockLots, type StockLot } from '../repositories/lot-stock'
import { readShop } from '../repositories/settings'
import type { Principal } from '../utils/context'
import { forbidden, invalid, ruleBroken } from '../utils/errors'
import type { Mutation } from '../utils/transactions'
import type { EffectiveBatch } from './batch-effective'
import { canHold, scaleInputOf } from './batch-sums'
import { lotFaultsOf, type LotFault } from './draft-rules'

const broken = (code: string, message: string) => ruleBroken(code, message, [{ path: 'to', message }])

/**
 * Who may amend: a sprayer what he mixed himself, until the end of the shop's day on which he mixed it; a foreman or
 * manager everything.
 *
 * @throws Refusal 403
 */
export async function requireAmender(m: Mutation, principal: Principal, batch: EffectiveBatch, field: string): Promise<void> {
  const { user } = principal
  if (!user) throw forbidden('Sign in to amend a batch.')
  const { zone } = await readShop(m.trx)
  const refusal = amendRefusal(user, batch.current, zone, m.now)
  if (refusal === 'other-person') throw forbidden('This batch is another person\'s. A foreman can amend it.')
  if (refusal === 'day-over') throw forbidden('A batch can be amended by its sprayer until the end of its day. A foreman can amend it now.')
  if (user.role === 'sprayer' && field === 'mixedByUserId') throw forbidden('Who mixed a batch is put right by a foreman.')
}

/**
 * What the new value must fit: the order of what happens to a pot, what there is, what the cup can hold.
 *
 * @param before the batch as it was, `after` as the amendment leaves it
 * @throws Refusal 422, or 400 for an id that names nothing
 */
export async function requireTrue(m: Mutation, field: string, record: BatchOnRecord, before: EffectiveBatch, after: EffectiveBatch): Promise<void> {
  requireRecorded(field, before)
  if (['reactiveAt', 'firstSprayAt', 'lastSprayAt', 'closedAt'].includes(field)) requireOrder(after, m.now, field)
  if (field === 'leftoverG' || pourFieldOf(field)) requireAmounts(record, before, after, field)
  if (['rhPct', 'surfaceC', 'airC'].includes(field) && after.facts.airC === null && (after.facts.rhPct ?? after.facts.surfaceC) !== null) {
    throw broken('air-first', 'Humidity and surface go with the air\'s temperature: give that first.')
  }
  const table = { gunId: 'guns', boothId: 'booths', mixedByUserId: 'users' }[field] as 'guns' | 'booths' | 'users' | undefined
  const id = after.values.get(field)
  if (table && id && !(await isThere(table, id, m.trx))) throw invalid([{ path: 'to', message: 'There is no such one.' }])
}

/** What was never noted is noted at the booth or bench, where its timers and windows follow. */
function requireRecorded(field: string, before: EffectiveBatch): void {
  if (!before.values.has(field)) throw invalid([{ path: 'field', message: 'This batch has no such weighing.' }])
  const what = { firstSprayAt: 'The first spray', lastSprayAt: 'The last spray', closedAt: 'Emptying it' }[field]
  if (what && before.values.get(field) === null) throw broken('not-recorded', `${what} is not recorded yet: note it at the booth or bench first.`)
  if (field === 'leftoverG' && before.current.closedAt === null) throw broken('not-recorded', 'It is not emptied yet: empty it at the booth or bench first.')
  if (before.current.state === 'stopped' && ['leftoverG', 'closedAt', 'reactiveAt'].includes(field)) throw broken('stopped', 'This mix was stopped: all of it is waste.')
}

function requireOrder({ current }: EffectiveBatch, now: number, field: string): void {
  const { reactiveAt, mixedAt, firstSprayAt, lastSprayAt, closedAt } = current
  const made = Math.min(mixedAt, reactiveAt ?? mixedAt)
  const steps: [number | null, string][] = [
    [field === 'reactiveAt' ? reactiveAt : made, 'the pot\'s life began'], [firstSprayAt, 'the first spray'], [lastSprayAt, 'the last spray'], [closedAt, 'it was emptied'],
    [now, 'now'],
  ]
  const known = steps.filter((step): step is [number, string] => step[0] !== null)
  known.forEach(([at, name], place) => {
    const next = known[place + 1]
    if (next && at > next[0]) throw broken('times-reversed', `That cannot be: ${name} would come after ${next[1]}.`)
  })
}

function requireAmounts(record: BatchOnRecord, before: EffectiveBatch, after: EffectiveBatch, field: string): void {
  const { scale, plan } = record.snapshot
  const total = sum(after.facts.pours.map(({ grams }) => new D(grams)))
  const grows = total.gt(before.current.pouredTotalG)
  if (grows && !canHold(total, scaleInputOf(scale, plan))) throw broken('over-scale', 'That is more than this scale can hold.')
  const { leftoverG } = after.current
  if (leftoverG !== null && total.lt(leftoverG)) throw broken('leftover-over-poured', field === 'leftoverG' ? 'More cannot be left than was mixed.' : 'More was left than that.')
}

/** What a foreman has to sign, and what is said to whom it needs. */
export interface Signing {
  action: string
  subject: string
  message: string
}

/**
 * What went into the cup is a fact: a lot that nobody may allow before the pour, a peroxide past its date, is signed for
 * too once it was poured.
 */
export function signingOf(fault: LotFault, { lotNumber, materialRole }: StockLot): Pick<Signing, 'action' | 'message'> {
  if (fault === 'blocked-lot') return { action: 'use-blocked-lot', message: `Lot ${lotNumber} is blocked. A foreman has to sign that it was poured.` }
  const past = `Lot ${lotNumber} was past its use-by date on the day of the pour.`
  const message = materialRole === 'peroxide'
    ? `${past} Nobody may allow an old peroxide; a foreman has to sign that it was poured all the same.`
    : `${past} A foreman has to sign that it was poured.`
  return { action: 'use-expired-lot', message }
}

/** The lot that a weighing is said to come from, with what forbids it: that it is blocked now, or was past its date on the day of the pour. */
export async function requireLot(m: Mutation, field: string, record: BatchOnRecord, lotId: string): Promise<{ lot: StockLot; faults: LotFault[] }> {
  const place = pourFieldOf(field)
  const lot = (await findStockLots([lotId], m.trx)).get(lotId)
  if (!lot) throw broken('unknown-lot', 'This lot is not booked in.')
  const component = record.components.find(({ index }) => index === place?.index)
  if (component?.materialId !== lot.materialId) throw broken('lot-of-other-material', `Lot ${lot.lotNumber} is of another material.`)
  const pour = record.pours.find(({ index, position }) => index === place?.index && position === place.position)
  const { zone } = await readShop(m.trx)
  return { lot, faults: lotFaultsOf(lot, shopDate(pour?.at ?? record.mixedAt, zone)) }
}
