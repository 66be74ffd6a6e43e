import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { MixRevisionBody } from '#shared/schemas/mixes'
import { changeMaterial } from '../../server/services/material-edits'
import { changeMix, reviseMix } from '../../server/services/mix-edits'
import { makeMaterial, makeMix } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
let mark: string
let baseId: string
let otherId: string
let mix: { mixId: string; code: string }
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(async () => {
  mark = randomUUID().slice(0, 8)
  baseId = await makeMaterial(work.admin, { code: `B-${mark}`, name: 'Base', role: 'base' })
  otherId = await makeMaterial(work.admin, { code: `O-${mark}`, name: 'Additive', role: 'additive' })
  mix = { mixId: (await makeMix(work.admin, mark, [[baseId, 'base', '100'], [otherId, 'additive', '5']])).mixId, code: `M-${mark}` }
})
afterAll(() => work.close())

const manager = () => work.as('manager')
const version = async (table: string, id: string) => (await work.admin(table).where({ id }).first<{ version: number }>('version')).version
const asPeroxide = async (id: string) => await changeMaterial(manager(), id, { version: await version('materials', id), role: 'peroxide' })
const revision = async (): Promise<MixRevisionBody> => ({
  version: await version('mixes', mix.mixId), basis: 'weight', potLifeMin: null, potLifeReferenceC: null, potLifeTable: null, halvesPerC: null, potLifeSource: null,
  lateFromPct: '75', inductionMin: '0', viscosity: null, densityGPerMl: null, volumeSolidsPct: null, leftoverSharePct: null, notes: null,
  components: [[baseId, 'base'], [otherId, 'additive']].map(([materialId = '', role]) => ({
    materialId, role: role as 'base' | 'additive', parts: role === 'base' ? '100' : '6', partsMax: null, tolerancePct: null, reactive: false,
  })),
})

describe('the role of a material', () => {
  it('stays while a mix in force takes it: the field says which', async () => {
    await expect(asPeroxide(otherId)).rejects.toMatchObject({ status: 422, code: 'role-in-use', fields: [{ path: 'role', message: expect.stringContaining(mix.code) }] })
    const { name } = await changeMaterial(manager(), otherId, { version: await version('materials', otherId), role: 'additive', name: 'Additive, new name' })
    expect(name).toBe('Additive, new name')
  })

  it('changes once the mix is put aside, which then does not come back with it', async () => {
    await changeMix(manager(), mix.mixId, { version: await version('mixes', mix.mixId), archived: true })
    expect((await asPeroxide(otherId)).role).toBe('peroxide')
    await expect(changeMix(manager(), mix.mixId, { version: await version('mixes', mix.mixId), archived: false })).rejects.toMatchObject({
      status: 409, code: 'in-use', message: expect.stringContaining(`O-${mark} is entered as peroxide`),
    })
  })

  it('cannot change while a revision that takes it is being written', async () => {
    await work.admin('mixes').where({ id: mix.mixId }).update({ current_revision_id: null })
    const both = await Promise.allSettled([reviseMix(manager(), mix.mixId, await revision()), asPeroxide(otherId)])
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
  })
})
