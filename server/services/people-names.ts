import type { PeopleList } from '#shared/schemas/shop'
import { listActivePeople } from '../repositories/people-names'
import type { Context } from '../utils/context'

/** Everybody who works here, by name, for screens on which nobody has signed in. */
export async function listPeople(ctx: Pick<Context, 'db'>): Promise<PeopleList> {
  return { items: await listActivePeople(ctx.db) }
}
