import type { Booth, Gun, MixingCup, Scale, ShopListQuery, User } from '#shared/schemas/shop'
import { daysBetween, shopDate } from '#shared/utils/zone'
import { readShop } from '../repositories/settings'
import { listBooths, listGuns, listMixingCups, listScales, listUsers, type NamePage } from '../repositories/shop'
import type { Context } from '../utils/context'
import { pageOf, readCursor, type Page } from './paging'

/** A valid training counts as ending soon from this many days on. Common practice, no source. */
const trainingEndsSoonDays = 60

/** The present instant and the shop's calendar day. */
export async function shopDay(ctx: Context): Promise<{ now: number, today: string }> {
  const [now, shop] = await Promise.all([ctx.clock.now(ctx.db), readShop(ctx.db)])
  return { now, today: shopDate(now, shop.zone) }
}

type Query = ShopListQuery

async function byName<T extends { id: string, name: string }>(query: Query, read: (page: NamePage) => Promise<T[]>): Promise<Page<T>> {
  const key = readCursor(query.cursor, ['text', 'id'])
  const [name = '', id = ''] = key ?? []
  const rows = await read({ inactive: query.inactive ?? false, after: key ? { name, id } : null, limit: query.limit + 1 })
  return pageOf(rows, query.limit, last => [last.name, last.id])
}

export const boothsPage = (ctx: Context, query: Query): Promise<Page<Booth>> => byName(query, page => listBooths(page, ctx.db))

export const gunsPage = (ctx: Context, query: Query): Promise<Page<Gun>> => byName(query, page => listGuns(page, ctx.db))

export const mixingCupsPage = (ctx: Context, query: Query): Promise<Page<MixingCup>> => byName(query, page => listMixingCups(page, ctx.db))

/** Scales with the days until their next check. */
export async function scalesPage(ctx: Context, query: Query): Promise<Page<Scale>> {
  const { today } = await shopDay(ctx)
  return await byName(query, async (page) => {
    const scales = await listScales(page, ctx.db)
    return scales.map(scale => ({ ...scale, nextCheckInDays: scale.nextCheckOn === null ? null : daysBetween(today, scale.nextCheckOn) }))
  })
}

/** People with where their training for isocyanates stands. The last day of a training still counts. */
export async function usersPage(ctx: Context, query: Query): Promise<Page<User>> {
  const { today } = await shopDay(ctx)
  return await byName(query, async (page) => {
    const users = await listUsers(page, ctx.db)
    return users.map(user => ({ ...user, isocyanateTraining: trainingAt(today, user.isocyanateTrainingUntil) }))
  })
}

/** Where a training stands on a day. */
function trainingAt(today: string, until: string | null): User['isocyanateTraining'] {
  if (until === null) return null
  const left = daysBetween(today, until)
  if (left < 0) return 'over'
  return left <= trainingEndsSoonDays ? 'ends-soon' : 'valid'
}
