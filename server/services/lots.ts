import { D } from '#shared/engine/decimal'
import { line, type WorkingLine } from '#shared/engine/working'
import type { Lot, LotCondition, LotItem, LotListQuery, LotMovement } from '#shared/schemas/lots'
import { lowSharePct, runsOutWithinDays } from '#shared/schemas/lots'
import { addDays, daysBetween } from '#shared/utils/zone'
import { listLotEvents } from '../repositories/lot-edits'
import { countBatches, findLot, listLotBatches, listLots, listMovements, sumMovements, type StoredLot } from '../repositories/lots'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
import { pageOf, readCursor, type Page } from './paging'
import { shopDay } from './shop'

/** No lot of a shop has more; what is older stays readable in the log. */
const mostRows = 500

/** A lot without a use-by date sorts after every lot that has one. */
const noExpiry = '9999-12-31'

/**
 * What a lot is on a day of the shop, the most pressing word first. The use-by date itself still counts as in date.
 * @param today the shop's date
 */
export function conditionOf(lot: Pick<StoredLot, 'state' | 'expiresOn'>, today: string): LotCondition {
  if (lot.state === 'blocked') return 'blocked'
  if (lot.state === 'empty') return 'used-up'
  if (lot.expiresOn === null) return lot.state
  const left = daysBetween(today, lot.expiresOn)
  if (left < 0) return 'out-of-date'
  return left <= runsOutWithinDays ? 'runs-out' : lot.state
}

/** True from a tenth of what was received down, until the lot is used up. */
function isLow(lot: StoredLot): boolean {
  return lot.state !== 'empty' && new D(lot.stockG).times(100).lte(new D(lot.receivedG).times(lowSharePct))
}

/** What the API says of stored lots on a day. */
export async function describeLots(lots: readonly StoredLot[], today: string, ctx: Context): Promise<LotItem[]> {
  const batches = await countBatches(lots.map(lot => lot.id), ctx.db)
  return lots.map((lot) => {
    const { createdAt: _createdAt, updatedAt: _updatedAt, ...head } = lot
    return {
      ...head,
      condition: conditionOf(lot, today),
      expiresInDays: lot.expiresOn === null ? null : daysBetween(today, lot.expiresOn),
      low: isLow(lot),
      batchCount: batches.get(lot.id) ?? 0,
    }
  })
}

/** A page of lots; with `order=first-expiring` in the order in which they should be poured. */
export async function lotsPage(ctx: Context, query: LotListQuery): Promise<Page<LotItem>> {
  const { today } = await shopDay(ctx)
  const { cursor, limit, expiresWithinDays, ...filter } = query
  const key = readCursor(cursor, ['day', 'id'])
  const [on = '', id = ''] = key ?? []
  const stored = await listLots(
    { ...filter, expiresBy: expiresWithinDays === undefined ? undefined : addDays(today, expiresWithinDays) },
    { today, soon: addDays(today, runsOutWithinDays) },
    { after: key ? { on, id } : null, limit: limit + 1 }, ctx.db)
  const page = pageOf(stored, limit, last => [query.order === 'newest' ? last.receivedOn : last.expiresOn ?? noExpiry, last.id])
  return { items: await describeLots(page.items, today, ctx), nextCursor: page.nextCursor }
}

/**
 * A lot with all that came and went.
 * @throws Refusal 404 when there is none
 */
export async function lotById(ctx: Context, id: string): Promise<Lot> {
  const lot = await findLot(id, ctx.db)
  if (!lot) throw notFound('The lot')
  const { today } = await shopDay(ctx)
  const [[item], sums, movements, batches, events] = await Promise.all([
    describeLots([lot], today, ctx),
    sumMovements(id, ctx.db),
    listMovements(id, mostRows, ctx.db),
    listLotBatches(id, mostRows, ctx.db),
    listLotEvents(id, ctx.db),
  ])
  if (!item) throw notFound('The lot')
  return { ...item, stockWorking: stockWorking(sums, lot.stockG), movements, batches, events, createdAt: lot.createdAt, updatedAt: lot.updatedAt }
}

const kindWords: Record<LotMovement['kind'], string> = {
  received: 'received', poured: 'poured into batches', compensation: 'put right by amendments', counted: 'put right by counting',
  wasted: 'wasted', split: 'split off',
}

function stockWorking(sums: { kind: LotMovement['kind'], grams: string }[], stockG: string): WorkingLine[] {
  const parts = sums.map(({ kind, grams }) => line(kindWords[kind], 'sum of the movements', new D(grams), 'g'))
  const formula = sums.map(({ grams }, place) => (place === 0 ? grams : grams.startsWith('-') ? `− ${grams.slice(1)}` : `+ ${grams}`)).join(' ')
  return [...parts, line('in stock', formula || '0', new D(stockG), 'g')]
}
