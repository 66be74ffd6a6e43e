import type { BatchExportQuery, BatchFacets, BatchList, BatchListQuery } from '#shared/schemas/batches'
import { addDays, startOfShopDay } from '#shared/utils/zone'
import { audienceOf } from '../live/audience'
import { countOpenReviews, readFacets } from '../repositories/batch-facets'
import { listBatchRows, type BatchFilter } from '../repositories/batch-list'
import { findLotsByNumber, mostLots } from '../repositories/batch-uses'
import { readShop } from '../repositories/settings'
import type { Context } from '../utils/context'
import { invalid } from '../utils/errors'
import { decodeCursor, encodeCursor } from '../utils/keyset'

type Reader = Pick<Context, 'db' | 'principal'>

/**
 * The log, the youngest first. Days are the shop's. A booth's screen sees its own booth.
 *
 * @throws Refusal 400 for a cursor of another list or a beginning of a lot's number that too many share, 403 when a screen asks for another booth
 */
export async function listBatches(ctx: Reader, { cursor, limit, ...query }: BatchListQuery): Promise<BatchList> {
  const filter = { ...(await filterOf(ctx, query)), after: cursor === undefined ? undefined : readCursor(cursor), limit: limit + 1 }
  const rows = await listBatchRows(filter, ctx.db)
  const shown = rows.slice(0, limit)
  const last = shown.at(-1)
  return {
    items: shown.map(({ item }) => item),
    nextCursor: rows.length > limit && last ? encodeCursor([last.sortedAt, last.item.id]) : null,
  }
}

/** The filters as the database takes them. */
export async function filterOf(ctx: Reader, { from, to, lot, lotId, ...filters }: BatchExportQuery): Promise<Omit<BatchFilter, 'limit'>> {
  // Only days need the shop's zone.
  const zone = from === undefined && to === undefined ? '' : (await readShop(ctx.db)).zone
  return {
    ...filters,
    lotIds: await lotsOf(ctx, lot, lotId),
    boothId: audienceOf(ctx.principal, filters.boothId).boothId ?? undefined,
    from: from === undefined ? undefined : startOfShopDay(from, zone),
    before: to === undefined ? undefined : startOfShopDay(addDays(to, 1), zone),
  }
}

/** Lots by the maker's number, by id, or by both where both are asked for. @throws Refusal 400 for a beginning that too many lots share */
async function lotsOf(ctx: Reader, lot: string | undefined, lotId: string | undefined): Promise<string[] | undefined> {
  if (lot === undefined) return lotId === undefined ? undefined : [lotId]
  const found = await findLotsByNumber(lot, ctx.db)
  if (found === null) throw invalid([{ path: 'lot', message: `More than ${mostLots} lots begin so. Type more of the number.` }])
  return lotId === undefined ? found : found.filter((id) => id === lotId)
}

function readCursor(cursor: string): { mixedAt: number; id: string } {
  const [mixedAt, id] = decodeCursor(cursor, ['instant', 'id'])
  return { mixedAt: Number(mixedAt), id: String(id) }
}

/** What the log can be narrowed by, and how many batches wait for a foreman. */
export async function batchFacets(ctx: Pick<Context, 'db'>): Promise<BatchFacets> {
  return { ...(await readFacets(ctx.db)), reviewOpen: await countOpenReviews(ctx.db) }
}
