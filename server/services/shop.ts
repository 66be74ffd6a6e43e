import type { Knex } from 'knex'
import type { Booth, Gun, MixingCup, Scale, ShopListQuery, User } from '#shared/schemas/shop'
import { daysBetween, shopDate } from '#shared/utils/zone'
import { readShop } from '../repositories/settings'
import { findBooth, findGuns, findMixingCup, findScaleFacts, listBooths, listGuns, listMixingCups, listScales, type NamePage } from '../repositories/shop'
import { findPerson, listUsers, type Person } from '../repositories/people'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
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
    return scales.map(scale => withCheck(scale, today))
  })
}

const withCheck = (scale: Omit<Scale, 'nextCheckInDays'>, today: string): Scale =>
  ({ ...scale, nextCheckInDays: scale.nextCheckOn === null ? null : daysBetween(today, scale.nextCheckOn) })

/** People with where their training for isocyanates stands. The last day of a training still counts. */
export async function usersPage(ctx: Context, query: Query): Promise<Page<User>> {
  const { today } = await shopDay(ctx)
  return await byName(query, async (page) => {
    const users = await listUsers(page, ctx.db)
    return users.map(user => withTraining(user, today))
  })
}

/** A person as the API answers one, with where the training stands on a day. */
export const withTraining = (person: Person, today: string): User =>
  ({ ...person, isocyanateTraining: trainingAt(today, person.isocyanateTrainingUntil) })

type Db = Knex | Knex.Transaction

/** @throws Refusal 404 when there is no such booth, in use or not */
export async function readBooth(_ctx: Context, id: string, db: Db): Promise<Booth> {
  return there(await findBooth(id, db), 'The booth')
}

/** @throws Refusal 404 when there is no such gun, in use or not */
export async function readGun(_ctx: Context, id: string, db: Db): Promise<Gun> {
  const [gun] = await findGuns([id], db)
  return there(gun ?? null, 'The gun')
}

/** @throws Refusal 404 when there is no such scale, in use or not */
export async function readScale(ctx: Context, id: string, db: Db): Promise<Scale> {
  const scale = there(await findScaleFacts(id, db), 'The scale')
  return withCheck(scale, (await shopDay(ctx)).today)
}

/** @throws Refusal 404 when there is no such mixing cup, in use or not */
export async function readMixingCup(_ctx: Context, id: string, db: Db): Promise<MixingCup> {
  return there(await findMixingCup(id, db), 'The mixing cup')
}

/** @throws Refusal 404 when there is no such person, in use or not */
export async function readPerson(ctx: Context, id: string): Promise<User> {
  const person = there(await findPerson(id, ctx.db), 'The person')
  return withTraining(person, (await shopDay(ctx)).today)
}

function there<T>(thing: T | null, what: string): T {
  if (thing === null) throw notFound(what)
  return thing
}

/** Where a training stands on a day. */
function trainingAt(today: string, until: string | null): User['isocyanateTraining'] {
  if (until === null) return null
  const left = daysBetween(today, until)
  if (left < 0) return 'over'
  return left <= trainingEndsSoonDays ? 'ends-soon' : 'valid'
}
