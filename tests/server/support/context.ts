import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import type { Role } from '#shared/types/roles'
import { toldClock } from '../../../server/utils/clock'
import type { Context, DevicePrincipal, Idempotency, Principal } from '../../../server/utils/context'
import { morning } from '../../factories/drafts'
import { makeShop, type Shop } from '../../factories/shop'
import { openSchema, type Schema } from './schema'

/** A shop of its own with a clock that the test moves, and contexts as the routes would make them. */
export interface Workshop extends Schema {
  shop: Shop
  /** Epoch milliseconds that every context tells. */
  clock: { now: number }
  /** Numbers of the events that were announced as committed. */
  woken: number[]
  as(role: Role, more?: Partial<Context>): Context
  asBench(): Context
  asScreen(boothId?: string): Context
  asSystem(): Context
}

/**
 * Service tests share one schema beside the server's, each file with its own shop in it. A file that looks at every batch
 * there is, as making the present state anew does, names a schema of its own.
 */
export async function openWorkshop(name = 'services'): Promise<Workshop> {
  const schema = await openSchema(name)
  const shop = await makeShop(schema.admin)
  const clock = { now: morning }
  const woken: number[] = []
  const context = (principal: Principal, more: Partial<Context> = {}): Context => ({
    db: schema.db, clock: toldClock(() => clock.now), principal, requestId: randomUUID(), wake: (seq) => void woken.push(seq), ...more,
  })
  const user = (role: Role) => ({ id: shop.users[role], role, name: role, initials: 'XY', email: `${role}-${shop.mark}@potbell.example`, sessionId: '0'.repeat(64) })
  const device = (kind: DevicePrincipal['kind'], id: string, boothId: string | null): Principal =>
    ({ kind: 'device', user: null, device: { id, kind, name: `${kind} ${shop.mark}`, boothId, scaleId: null } })
  return {
    ...schema,
    shop,
    clock,
    woken,
    as: (role, more) => context({ kind: 'user', user: user(role), device: null }, more),
    asBench: () => context(device('bench', shop.benchId, null)),
    asScreen: (boothId = shop.boothId) => context(device('screen', shop.screenId, boothId)),
    asSystem: () => context({ kind: 'system', user: null, device: null }),
  }
}

/** An idempotency key as the route maker would read it. */
export const idempotency = (key: string, bodyHash = 'a'.repeat(64)): Idempotency => ({ key, route: 'POST /api/batches', bodyHash, status: 201 })

/** How much of a lot is there, in grams with four decimals. */
export async function stock(lotId: string, db: Knex): Promise<string> {
  const [row] = await db('lot_movements').where({ lot_id: lotId }).sum<{ grams: string }[]>({ grams: 'grams' })
  return row?.grams ?? '0.0000'
}
