import { randomUUID } from 'node:crypto'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { sealBatch } from '../../../server/services/batches'
import { saveDraft } from '../../../server/services/drafts'
import { toldClock } from '../../../server/utils/clock'
import type { Context } from '../../../server/utils/context'
import { draftBody, morning, poured } from '../../factories/drafts'
import { makeShop, type Shop } from '../../factories/shop'
import { openSchema, type Schema } from '../../server/support/schema'
import { listenForBell, ringsAgain, ringsOf } from '../support/bell'
import { signIn } from '../support/browser'
import { advanceClock } from '../support/clock'
import { letForemanIn, ownServer, type OwnServer } from '../support/own-server'
import { useVisitors } from '../support/visitors'

const { visit } = useVisitors()
let schema: Schema
let shop: Shop
let server: OwnServer

beforeAll(async () => {
  schema = await openSchema('restart', { poolMax: 5 })
  shop = await makeShop(schema.admin)
  await letForemanIn(schema.admin, shop)
  server = await ownServer(schema.url)
  await server.start()
}, 120_000)
afterAll(async () => {
  await server.close()
  await schema.drop()
})

/** A pot of 120 min life whose hardener went in nine minutes ago. */
async function mixedPot(): Promise<{ id: string, code: string, endsAt: number }> {
  const user = { id: shop.users.sprayer, role: 'sprayer' as const, name: 'Sprayer', initials: 'XY', email: `sprayer-${shop.mark}@potbell.example`, sessionId: '0'.repeat(64) }
  const ctx: Context = { db: schema.db, clock: toldClock(Date.now), principal: { kind: 'user', user, device: null }, requestId: randomUUID(), wake: () => undefined }
  const id = randomUUID()
  await saveDraft(ctx, id, draftBody(shop, { components: poured(shop, ['1450', '725', '290'], (Date.now() - morning) / 60_000 - 10) }))
  await sealBatch(ctx, { draftId: id })
  const row = await schema.admin('batch_current as c').join('batches as b', 'b.id', 'c.batch_id').where('b.id', id).first<{ code: string, ends_at: Date }>('b.code', 'c.ends_at')
  return { id, code: row.code, endsAt: row.ends_at.getTime() }
}

async function armedWall(): Promise<Page> {
  const { page } = await visit({ screen: 'booth', losesNetwork: true })
  await listenForBell(page)
  await signIn(page, 'foreman', `/screen/${shop.boothId}`, server.url)
  await page.getByRole('button', { name: /Tap to arm the bell/ }).click()
  await page.getByText('Connected').waitFor()
  return page
}

describe('a server that is down while a pot\'s life ends', () => {
  it('rings once on every wall when it is back, and the walls come back without a touch', async () => {
    const pot = await mixedPot()
    const walls = [await armedWall(), await armedWall()]
    for (const wall of walls) await wall.locator(`[data-pot="${pot.code}"][data-state="fresh"]`).waitFor()

    await server.stop()
    for (const wall of walls) await wall.getByText(/No connection since \d\d:\d\d, timers run on/).waitFor({ timeout: 25_000 })
    await advanceClock(schema.admin, pot.endsAt - Date.now() + 60_000)
    const startedAt = Date.now()
    await server.start()
    const upAt = Date.now()
    for (const wall of walls) await wall.getByText('Connected').waitFor({ timeout: 10_000 })
    for (const wall of walls) await wall.locator(`[data-pot="${pot.code}"][data-state="life-up"]`).waitFor({ timeout: 10_000 })
    for (const wall of walls) await ringsAgain(wall, 0)
    expect(Date.now() - upAt).toBeLessThanOrEqual(10_000)

    const { id: timerId } = await schema.admin('timers').where({ subject_id: pot.id, kind: 'pot-up' }).first<{ id: string }>('id')
    expect(await schema.admin('audit_entries').where({ action: 'timer.fired', subject: `timer:${timerId}` })).toHaveLength(1)
    for (const wall of walls) {
      // The second stroke of one ringing comes four seconds after the first; two ringings at once would come closer.
      await ringsAgain(wall, 1)
      const [first = 0, second = 0] = await ringsOf(wall)
      expect(first).toBeGreaterThanOrEqual(startedAt)
      expect(second - first).toBeGreaterThan(2_500)
    }
  }, 180_000)
})
