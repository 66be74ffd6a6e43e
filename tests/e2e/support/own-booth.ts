import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import type { DraftInput } from '#shared/schemas/drafts'
import { draftBody, morning, poured } from '../../factories/drafts'
import { makeShop, type Shop } from '../../factories/shop'
import { signedIn, type Client } from '../../server/support/http'

/** A pot that stands in the test's own booth. */
export interface OwnPot {
  id: string
  code: string
  /** Epoch milliseconds. */
  lateAt: number
  endsAt: number
}

/** Booths of a test's own in the running shop, so that no pot of another test hangs on their walls. */
export interface OwnBooth {
  shop: Shop
  foreman: Client
  /** The server's present, epoch milliseconds. */
  now: () => Promise<number>
  /** Mixes a pot of 120 min life through the API, its hardener poured nine minutes ago, for the second of the three pieces unless told otherwise. */
  mix: (more?: Partial<DraftInput>) => Promise<OwnPot>
  extraction: (state: 'running' | 'off' | 'unknown') => Promise<void>
}

/** @param admin of the schema of the server that all browser tests share */
export async function makeOwnBooth(admin: Knex): Promise<OwnBooth> {
  const shop = await makeShop(admin)
  const foreman = await signedIn('foreman')
  const { body: session } = await foreman.get<{ user: { id: string } }>('/api/session')
  const now = async () => Date.parse((await foreman.get<{ now: string }>('/api/time')).body.now)
  async function done(work: string, answer: Promise<{ status: number; body: unknown }>): Promise<void> {
    const { status, body } = await answer
    if (status >= 300) throw new Error(`${work}: ${status} ${JSON.stringify(body)}`)
  }
  return {
    shop,
    foreman,
    now,
    async mix(more = {}) {
      const id = randomUUID()
      const components = poured(shop, ['1450', '725', '290'], (await now() - morning) / 60_000 - 10)
      await done('the draft', foreman.put(`/api/batch-drafts/${id}`, draftBody(shop, { components, mixedByUserId: session.user.id, ...more })))
      await done('the batch', foreman.post('/api/batches', { draftId: id }))
      const row = await admin('batch_current as c').join('batches as b', 'b.id', 'c.batch_id').where('b.id', id)
        .first<{ code: string; late_at: Date; ends_at: Date }>('b.code', 'c.late_at', 'c.ends_at')
      return { id, code: row.code, lateAt: row.late_at.getTime(), endsAt: row.ends_at.getTime() }
    },
    extraction: (state) => done('the extraction', foreman.post(`/api/booths/${shop.boothId}/extraction`, { state })),
  }
}
