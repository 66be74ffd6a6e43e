import { D, print } from '#shared/engine/decimal'
import type { Lot, LotCreateBody, LotMovementBody, LotPatchBody, LotReasonBody } from '#shared/schemas/lots'
import { disposalFor } from '#shared/utils/disposal'
import { gramsOfLitres } from '#shared/utils/lot-amount'
import {
  findLotByNumber, insertLot, insertLotEvent, insertLotWaste, insertMovement, setCounted, setLotState, updateLot,
} from '../repositories/lot-edits'
import { lockLots } from '../repositories/lot-stock'
import { findLot, type StoredLot } from '../repositories/lots'
import { findMaterial, lockMaterial, type StoredMaterial } from '../repositories/materials'
import { changesOf } from '../utils/changes'
import { duplicate, versionConflict } from '../utils/conflict'
import { userIdOf, type Context } from '../utils/context'
import { invalid, notFound, Refusal, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutate, type Mutation } from '../utils/transactions'
import { lotById } from './lots'
import { shopDay } from './shop'

const wordFields = ['lotNumber', 'place'] as const

const answer = (ctx: Context, m: Mutation, id: string): Promise<Lot> => lotById({ ...ctx, db: m.trx }, id)

/** Benches hear of it and read their lots anew. */
const tell = (m: Mutation, id: string) => m.publish({ type: 'lot', subject: `lot:${id}`, boothId: null, payload: { id } })

/**
 * Books a lot in, with the movement that brings its grams.
 * @throws Refusal 400 for a material that is not in use, a missing density or a day to come, 409 `duplicate` for a number
 * that the material has already
 */
export function bookIn(ctx: Context, body: LotCreateBody): Promise<Lot> {
  return mutate(ctx, async (m) => {
    const material = await lockMaterial(body.materialId, m.trx)
    if (!material || material.archived) throw invalid([{ path: 'materialId', message: 'Choose a material that is in use.' }])
    const grams = gramsBooked(body, material)
    await refuseFutureDay(ctx, m, body.receivedOn)
    await refuseSameNumber(material.id, body.lotNumber, null, m)
    const id = newId()
    await insertLot(id, body, m.now, m.trx)
    await insertMovement({ lotId: id, kind: 'received', grams, reason: null, userId: userIdOf(ctx.principal) }, m.now, m.trx)
    const { materialId, receivedOn, expiresOn, pricePerKg } = body
    m.audit({ action: 'lot.received', subject: `lot:${id}`, facts: { materialId, grams, receivedOn, expiresOn, pricePerKg } })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

function gramsBooked({ grams, litres }: LotCreateBody, material: StoredMaterial): string {
  if (litres === null) return grams ?? '0'
  if (material.densityGPerMl === null) throw invalid([{ path: 'litres', message: 'The density of this material is not known: weigh it and give grams.' }])
  return gramsOfLitres(litres, material.densityGPerMl)
}

async function refuseFutureDay(ctx: Context, m: Mutation, day: string | undefined): Promise<void> {
  if (day === undefined) return
  const { today } = await shopDay({ ...ctx, db: m.trx })
  if (day > today) throw invalid([{ path: 'receivedOn', message: 'This day is still to come.' }])
}

async function refuseSameNumber(materialId: string, lotNumber: string, ownId: string | null, m: Mutation): Promise<void> {
  const other = await findLotByNumber(materialId, lotNumber, m.trx)
  if (other !== null && other !== ownId) throw duplicate('lotNumber', 'This lot of the material is booked in already. If more of it came, add it on the lot\'s page.')
}

/** The lot, held until the transaction ends. Its material is held first where numbers are compared. */
async function lockedLot(id: string, m: Mutation): Promise<StoredLot> {
  await lockLots([id], m.trx)
  const lot = await findLot(id, m.trx)
  if (!lot) throw notFound('The lot')
  return lot
}

/**
 * Puts slips of the pen right: number, days, price, place.
 * @throws Refusal 404, 409 `version-conflict` with what stands now, 409 `duplicate`, 400 for a day to come
 */
export function correctLot(ctx: Context, id: string, { version, ...fields }: LotPatchBody): Promise<Lot> {
  return mutate(ctx, async (m) => {
    const known = await findLot(id, m.trx)
    if (!known) throw notFound('The lot')
    await lockMaterial(known.materialId, m.trx)
    const lot = await lockedLot(id, m)
    if (lot.version !== version) throw await versionConflict(await answer(ctx, m, id), `lot:${id}`, m.trx)
    await refuseFutureDay(ctx, m, fields.receivedOn)
    if (fields.lotNumber !== undefined) await refuseSameNumber(lot.materialId, fields.lotNumber, id, m)
    await updateLot(id, fields, m.now, m.trx)
    m.audit({ action: 'lot.corrected', subject: `lot:${id}`, facts: changesOf(lot, fields, wordFields) })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

/**
 * Takes a lot from the benches at once, with the reason.
 * @throws Refusal 404, 409 `already-blocked`
 */
export function blockLot(ctx: Context, id: string, { reason }: LotReasonBody): Promise<Lot> {
  return mutate(ctx, async (m) => {
    const lot = await lockedLot(id, m)
    if (lot.state === 'blocked') throw new Refusal(409, 'already-blocked', 'This lot is blocked already.', [], { current: await answer(ctx, m, id) })
    await setLotState(id, 'blocked', reason, m.now, m.trx)
    return await noted(ctx, m, lot, 'blocked', reason)
  })
}

/**
 * Gives a blocked lot back to the benches, with the reason.
 * @throws Refusal 404, 409 `not-blocked`
 */
export function releaseLot(ctx: Context, id: string, { reason }: LotReasonBody): Promise<Lot> {
  return mutate(ctx, async (m) => {
    const lot = await lockedLot(id, m)
    if (lot.state !== 'blocked') throw new Refusal(409, 'not-blocked', 'This lot is not blocked.', [], { current: await answer(ctx, m, id) })
    await setLotState(id, freeState(lot, lot.stockG), null, m.now, m.trx)
    return await noted(ctx, m, lot, 'released', reason)
  })
}

/** What a lot is when nobody holds it back. */
const freeState = (lot: Pick<StoredLot, 'openedAt'>, stockG: string): 'sealed' | 'in-use' | 'empty' =>
  new D(stockG).lte(0) ? 'empty' : lot.openedAt === null ? 'sealed' : 'in-use'

async function noted(ctx: Context, m: Mutation, lot: StoredLot, kind: 'blocked' | 'released', reason: string): Promise<Lot> {
  const eventId = await insertLotEvent(lot.id, kind, reason, userIdOf(ctx.principal), m.now, m.trx)
  m.audit({ action: `lot.${kind}`, subject: `lot:${lot.id}`, facts: { eventId, before: lot.state } })
  tell(m, lot.id)
  return await answer(ctx, m, lot.id)
}

/**
 * Enters grams by hand: a count, more of the same lot, or what was thrown away. Unlike a pour, which has happened, it may
 * not leave less than nothing.
 * @throws Refusal 404, 422 `stock-negative`
 */
export function moveLot(ctx: Context, id: string, { kind, grams, reason }: LotMovementBody): Promise<Lot> {
  return mutate(ctx, async (m) => {
    const lot = await lockedLot(id, m)
    const change = kind === 'counted' ? new D(grams).minus(lot.stockG) : kind === 'wasted' ? new D(grams).negated() : new D(grams)
    const stock = new D(lot.stockG).plus(change)
    if (stock.lt(0)) {
      const message = `The books have only ${lot.stockG} g of it. Count it first.`
      throw ruleBroken('stock-negative', message, [{ path: 'grams', message }])
    }
    const userId = userIdOf(ctx.principal)
    const movementId = await insertMovement({ lotId: id, kind, grams: print(change), reason, userId }, m.now, m.trx)
    if (kind === 'counted') await setCounted(id, m.now, m.trx)
    if (kind === 'wasted') await noteWaste(lot, grams, reason, userId, m)
    if (lot.state !== 'blocked') await setLotState(id, freeState(lot, print(stock)), null, m.now, m.trx)
    m.audit({ action: 'lot.moved', subject: `lot:${id}`, facts: { movementId, kind, grams: print(change), stockG: print(stock) } })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

async function noteWaste(lot: StoredLot, grams: string, reason: string, userId: string | null, m: Mutation): Promise<void> {
  const chemistry = (await findMaterial(lot.materialId, m.trx))?.chemistry ?? ''
  await insertLotWaste({ lotId: lot.id, chemistry, grams, disposal: disposalFor(chemistry, false).key, reason, userId }, m.now, m.trx)
}
