import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { Batch, BatchList } from '#shared/schemas/batches'
import type { BenchLot, BenchMix, BenchSnapshot } from '#shared/schemas/bench'
import { Draft } from '#shared/schemas/drafts'
import { createKnex } from '../../server/database/connection'
import { Client, enrolled, signedIn, signedInOften } from './support/http'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '')
afterAll(() => admin.destroy())

let sprayer: Client
let foreman: Client
let mix: BenchMix
let lots: Map<string, BenchLot>
let place: { boothId: string; otherBoothId: string; gunId: string; scaleId: string; userId: string }

/** The first mix of the demo's bench that hardens and whose every component has a lot with enough in it. */
beforeAll(async () => {
  sprayer = await signedInOften('sprayer')
  foreman = await signedIn('foreman')
  const { body: snapshot } = await sprayer.get<BenchSnapshot>('/api/bench/snapshot')
  const plenty = new Map(snapshot.lots.filter(({ stockG }) => stockG.split('.')[0]!.length >= 4 && !stockG.startsWith('-')).map((lot) => [lot.materialId, lot]))
  const found = snapshot.mixes.find(({ basis, potLifeMin, components }) =>
    basis === 'weight' && potLifeMin !== null && components.some(({ reactive }) => reactive) && components.every(({ materialId, role }) => plenty.has(materialId) && role !== 'peroxide'))
  const [booth, other] = snapshot.booths
  const { body: session } = await sprayer.get<{ user: { id: string } }>('/api/session')
  if (!found || !booth || !other || !snapshot.guns[0] || !snapshot.scales[0]) throw new Error('the demo shop has no bench to mix at')
  mix = found
  lots = plenty
  place = { boothId: booth.id, otherBoothId: other.id, gunId: snapshot.guns[0].id, scaleId: snapshot.scales[0].id, userId: session.user.id }
})

/** Grams of every component: its parts, a few minutes ago, one after the other. */
async function body(more: object = {}) {
  const { body: time } = await sprayer.get<{ now: string }>('/api/time')
  const now = Date.parse(time.now)
  return {
    seq: 1, planId: randomUUID(), potNumber: 1, potCount: 1, mixRevisionId: mix.revisionId, purpose: 'test panels', boothId: place.boothId, gunId: place.gunId,
    scaleId: place.scaleId, mixedByUserId: place.userId, plan: { totalG: '300', scaleDivisionG: '0.1' },
    components: mix.components.map(({ index, materialId, parts }) => ({
      index,
      pours: [{ lotId: lots.get(materialId)?.id, grams: parts, at: new Date(now - (20 - index) * 1000).toISOString(), source: 'typed', round: 0 }],
    })),
    ...more,
  }
}

async function sealed(client = sprayer): Promise<Batch> {
  const id = randomUUID()
  await client.put(`/api/batch-drafts/${id}`, await body())
  const { body: batch } = await client.post<Batch>('/api/batches', { draftId: id })
  return batch
}

describe('a batch over HTTP', () => {
  it('goes from draft to log in the shapes that the schemas name', async () => {
    const id = randomUUID()
    const put = await sprayer.put(`/api/batch-drafts/${id}`, await body())
    expect(put.status).toBe(200)
    expect(z.safeParse(Draft, put.body).error).toBeUndefined()
    expect((await sprayer.get(`/api/batch-drafts/${id}`)).body).toEqual(put.body)
    const post = await sprayer.post('/api/batches', { draftId: id })
    expect(post.status).toBe(201)
    expect(z.safeParse(Batch, post.body).error).toBeUndefined()
    expect(post.body).toMatchObject({ id, code: put.body.code, state: 'fresh', review: [] })
    expect((await foreman.get(`/api/batches/${id}`)).body).toEqual(post.body)
    const list = await foreman.get(`/api/batches?lotId=${lots.get(mix.components[0]?.materialId ?? '')?.id}&state=fresh&limit=200`)
    expect(z.safeParse(BatchList, list.body).error).toBeUndefined()
    expect((list.body as BatchList).items.map((item) => item.id)).toContain(id)
  })

  it('is one row of a hundred identical requests', async () => {
    const id = randomUUID()
    await sprayer.put(`/api/batch-drafts/${id}`, await body())
    const key = randomUUID()
    const answers = await Promise.all(Array.from({ length: 100 }, () => sprayer.copy().post('/api/batches', { draftId: id }, { key })))
    expect(new Set(answers.map(({ status }) => status))).toEqual(new Set([201]))
    expect(new Set(answers.map((answer) => JSON.stringify(answer.body))).size).toBe(1)
    expect(await admin('batches').where({ id })).toHaveLength(1)
    expect(await admin('audit_entries').where({ subject: `batch:${id}`, action: 'batch.sealed' })).toHaveLength(1)
  })

  it('is emptied once: the second is told what it is now', async () => {
    const { id } = await sealed()
    expect((await sprayer.post(`/api/batches/${id}/events`, { kind: 'first-spray' })).status).toBe(201)
    expect((await sprayer.post(`/api/batches/${id}/close`, { leftoverG: '5' })).body).toMatchObject({ state: 'emptied', leftoverG: '5' })
    expect(await sprayer.post(`/api/batches/${id}/close`, { leftoverG: '6' })).toMatchObject({ status: 409, body: { code: 'already-closed', current: { leftoverG: '5' } } })
  })

  it('is touched by the screen of its booth and by no other', async () => {
    const { id } = await sealed()
    const other = await enrolled('screen', place.otherBoothId)
    const own = await enrolled('screen', place.boothId)
    expect((await other.post(`/api/batches/${id}/close`, { leftoverG: '0' })).status).toBe(404)
    expect((await other.get(`/api/batches/${id}`)).status).toBe(404)
    expect((await own.post(`/api/batches/${id}/close`, { leftoverG: '0' })).status).toBe(200)
    expect((await own.put(`/api/batch-drafts/${randomUUID()}`, await body())).status).toBe(403)
  })

  it.each([
    ['grams with a comma', { grams: '1,5' }, 400, 'invalid'],
    ['grams below nothing', { grams: '-1' }, 422, 'negative-grams'],
    ['a lot that is not there', { lotId: randomUUID() }, 422, 'unknown-lot'],
  ])('refuses %s beside its field and echoes nothing', async (_what, change, status, code) => {
    const sent = await body()
    Object.assign(sent.components[0]?.pours[0] ?? {}, change)
    const answer = await sprayer.put(`/api/batch-drafts/${randomUUID()}`, sent)
    expect(answer).toMatchObject({ status, body: { code, fields: [{ path: `components.0.pours.0.${Object.keys(change)[0]}` }] } })
    expect(JSON.stringify(answer.body)).not.toContain(String(Object.values(change)[0]).length > 3 ? Object.values(change)[0] : '"-1"')
  })

  it('takes a plan that cannot be as bad input, with its field', async () => {
    const answer = await sprayer.put(`/api/batch-drafts/${randomUUID()}`, await body({ plan: { totalG: '0', scaleDivisionG: '0.1' } }))
    expect(answer).toMatchObject({ status: 400, body: { code: 'too-small', fields: [{ path: 'plan.totalG' }] } })
  })

  it('needs a session, a key to post and an id that is one', async () => {
    expect((await new Client().put(`/api/batch-drafts/${randomUUID()}`, await body())).status).toBe(401)
    expect(await sprayer.post('/api/batches', { draftId: randomUUID() }, { headers: { 'idempotency-key': undefined } })).toMatchObject({ status: 400, body: { code: 'idempotency-key-missing' } })
    expect((await sprayer.post('/api/batches', { draftId: randomUUID() })).status).toBe(404)
    expect((await sprayer.get('/api/batches/nonsense')).status).toBe(400)
    expect((await sprayer.get('/api/batches?cursor=nonsense')).status).toBe(400)
    expect((await sprayer.put(`/api/batch-drafts/${randomUUID()}`, { nonsense: true })).status).toBe(400)
  })
})
