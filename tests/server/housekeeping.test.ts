import { randomBytes, randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { keyDays, sessionDays, tidyUp } from '../../server/services/housekeeping'
import { openWorkshop, type Workshop } from './support/context'

const dayMs = 86_400_000

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
afterAll(() => work.close())
// Far behind everything that other files wrote, so that a round takes away nothing of theirs.
beforeEach(() => void (work.clock.now = Date.UTC(2001, 0, 1)))

const ago = (days: number) => new Date(work.clock.now - days * dayMs)
const tidy = () => tidyUp(work.db, work.clock.now)

async function key(days: number): Promise<string> {
  const idempotencyKey = randomUUID()
  await work.admin('idempotency_keys').insert({
    principal: 'system', route: 'POST /api/test', idempotency_key: idempotencyKey, body_hash: 'a'.repeat(64), status: 201, answer: '{}', created_at: ago(days),
  })
  return idempotencyKey
}

async function session(days: number, deviceId: string | null): Promise<string> {
  const id = randomBytes(32).toString('hex')
  const at = ago(days)
  await work.admin('sessions').insert({ id, user_id: work.shop.users.sprayer, device_id: deviceId, created_at: at, last_seen_at: at, expires_at: at })
  return id
}

async function limit(days: number): Promise<string> {
  const name = `sign-in:${randomUUID()}`
  await work.admin('sign_in_limits').insert({ key: name, points: 3, expire: ago(days).getTime() })
  return name
}

const left = (table: string, column: string, values: string[]) => work.admin(table).whereIn(column, values).pluck<string[]>(column)

describe('housekeeping', () => {
  it('keeps an idempotency key for longer than a week and then takes it away', async () => {
    const [old, young, week] = [await key(keyDays + 1), await key(keyDays - 1), await key(7)]
    await tidy()
    expect((await left('idempotency_keys', 'idempotency_key', [old, young, week])).sort()).toEqual([young, week].sort())
    expect(keyDays).toBeGreaterThan(7)
  })

  it('takes away more than one statement does', async () => {
    const keys = await Promise.all(Array.from({ length: 5 }, () => key(keyDays + 2)))
    const rows = Array.from({ length: 600 }, () => ({
      principal: 'system', route: 'POST /api/many', idempotency_key: randomUUID(), body_hash: 'b'.repeat(64), status: 201, answer: '{}', created_at: ago(keyDays + 1),
    }))
    await work.admin('idempotency_keys').insert(rows)
    expect(await tidy()).toBeGreaterThanOrEqual(605)
    expect(await left('idempotency_keys', 'idempotency_key', [...keys, ...rows.map((row) => row.idempotency_key)])).toEqual([])
  })

  it('takes away sessions long over, but not by what a bench knows who has signed in on it', async () => {
    const [first, last] = [await session(sessionDays + 20, work.shop.benchId), await session(sessionDays + 10, work.shop.benchId)]
    const [loose, recent] = [await session(sessionDays + 1, null), await session(sessionDays - 1, null)]
    await tidy()
    expect((await left('sessions', 'id', [first, last, loose, recent])).sort()).toEqual([last, recent].sort())
  })

  it('takes away counts of wrong passwords whose time is over', async () => {
    const [spent, running] = [await limit(2), await limit(-1)]
    await tidy()
    expect(await left('sign_in_limits', 'key', [spent, running])).toEqual([running])
  })

  it('is done once, however many processes try at the same time', async () => {
    const keys = await Promise.all(Array.from({ length: 20 }, () => key(keyDays + 1)))
    const gone = await Promise.all([tidy(), tidy(), tidy()])
    expect(gone.reduce((sum, one) => sum + one, 0)).toBe(20)
    expect(await left('idempotency_keys', 'idempotency_key', keys)).toEqual([])
  })
})
