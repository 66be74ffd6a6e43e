import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import { expect } from 'vitest'
import { signedIn } from '../../server/support/http'

/** A nitrocellulose pot in the record of a booth, made by the sprayer through the API as another bench would have written it. Returns its id. */
export async function recordNitro(admin: Knex, boothId: string | null, mixedAt: Date): Promise<string> {
  const sprayer = await signedIn('sprayer')
  const { body: me } = await sprayer.get<{ user: { id: string } }>('/api/session')
  const nitro = await admin('mixes as m').join('mix_components as c', 'c.mix_revision_id', 'm.current_revision_id').join('materials as t', 't.id', 'c.material_id')
    .where({ 't.chemistry': 'nitrocellulose', 'c.role': 'base' }).orderBy('m.code').first<{ mix_revision_id: string }>('c.mix_revision_id')
  const rows = await admin('mix_components').where(nitro).orderBy('position').select<{ material_id: string, parts: string }[]>('material_id', 'parts')
  const at = mixedAt.toISOString()
  const components = await Promise.all(rows.map(async ({ material_id, parts }, index) => {
    const lot = await admin('lots').where({ material_id }).whereIn('state', ['sealed', 'in-use']).orderBy('expires_on', 'desc').first<{ id: string }>('id')
    return { index, pours: [{ lotId: lot.id, grams: String(Number(parts)), at, source: 'typed', round: 0 }] }
  }))
  const id = randomUUID()
  const total = rows.reduce((sum, { parts }) => sum + Number(parts), 0)
  const saved = await sprayer.put(`/api/batch-drafts/${id}`, {
    seq: 1, planId: randomUUID(), potNumber: 1, potCount: 1, mixRevisionId: nitro.mix_revision_id, jobStepId: null, purpose: 'Clash test', pieceIds: [], boothId, gunId: null,
    scaleId: null, mixedByUserId: me.user.id, plan: { totalG: String(total), scaleDivisionG: '0.1' }, components,
  })
  expect(saved.status, JSON.stringify(saved.body)).toBe(200)
  expect((await sprayer.post('/api/batches', { draftId: id })).status).toBe(201)
  expect((await sprayer.post(`/api/batches/${id}/close`, { leftoverG: '0' })).status).toBe(200)
  return id
}
