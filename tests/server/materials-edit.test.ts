import { randomUUID } from 'node:crypto'
import { beforeAll, describe, expect, it } from 'vitest'
import type { HazardStatementList, Material, MaterialList } from '#shared/schemas/materials'
import type { MixItem } from '#shared/schemas/mixes'
import type { Client} from './support/http';
import { signedIn } from './support/http'

let manager: Client
let foreman: Client
let sprayer: Client
beforeAll(async () => {
  manager = await signedIn('manager')
  foreman = await signedIn('foreman')
  sprayer = await signedIn('sprayer')
})

const mark = (): string => randomUUID().slice(0, 8)
const sheet = (more: Record<string, unknown> = {}) => ({
  code: `T-${mark()}`, name: 'Sealer for a test', role: 'base', chemistry: 'polyurethane', containsIsocyanates: false, densityGPerMl: '1.18', solidsPct: '46',
  volumeSolidsPct: '38', reactsPct: null, vocGPerL: '520.5', vocPct: null, waterPct: null, exemptPct: null, flashPointC: '24', shelfLifeDays: 365,
  supplier: 'Trade counter', makerCode: 'TS-1', pricePerKg: '11.40', signalWord: 'Warning', hazardCodes: ['H226', 'H336'], protectionMixing: 'Gloves.',
  protectionSpraying: null, reorderPointG: '8000', ...more,
})
type Refused = { code: string, message: string, fields: { path: string, message: string }[] }

async function entered(more: Record<string, unknown> = {}): Promise<Material> {
  const { status, body } = await manager.post<Material>('/api/materials', sheet(more))
  expect(status, JSON.stringify(body)).toBe(201)
  return body
}

describe('POST /api/materials', () => {
  it('enters a material as its sheet has it, statements word for word', async () => {
    const material = await entered()
    expect(material).toMatchObject({ name: 'Sealer for a test', densityGPerMl: '1.18', vocGPerL: '520.5', shelfLifeDays: 365, usableStockG: '0', version: 1, archived: false })
    expect(material.hazards).toEqual([
      { code: 'H226', kind: 'H', text: 'Flammable liquid and vapour.' }, { code: 'H336', kind: 'H', text: 'May cause drowsiness or dizziness.' },
    ])
    expect((await sprayer.get<Material>(`/api/materials/${material.id}`)).body).toEqual(material)
  })

  it('is the manager\'s alone', async () => {
    for (const client of [foreman, sprayer]) {
      expect((await client.post('/api/materials', sheet())).status).toBe(403)
    }
  })

  it('refuses a code that is taken, whatever its case, beside the field', async () => {
    const { code } = await entered()
    const { status, body } = await manager.post<Refused>('/api/materials', sheet({ code: code.toUpperCase() }))
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'duplicate', fields: [{ path: 'code' }] })
  })

  it.each<[string, Record<string, unknown>, string]>([
    ['no name', { name: '  ' }, 'name'],
    ['a code with a space', { code: 'A 1' }, 'code'],
    ['a role that is none', { role: 'glue' }, 'role'],
    ['a density with a comma', { densityGPerMl: '1,18' }, 'densityGPerMl'],
    ['a density of nothing', { densityGPerMl: '0.0' }, 'densityGPerMl'],
    ['solids above the whole', { solidsPct: '100.1' }, 'solidsPct'],
    ['solvent given twice', { vocPct: '40' }, 'vocPct'],
    ['shares above the whole', { vocGPerL: null, vocPct: '50', waterPct: '10' }, 'solidsPct'],
    ['half a day of shelf life', { shelfLifeDays: 1.5 }, 'shelfLifeDays'],
    ['a statement that nobody knows', { hazardCodes: ['H999'] }, 'hazardCodes'],
    ['isocyanates by statement but not ticked', { hazardCodes: ['EUH204'] }, 'containsIsocyanates'],
    ['a negative price', { pricePerKg: '-1' }, 'pricePerKg'],
    ['a field that is none', { colour: 'white' }, 'colour'],
  ])('refuses %s beside its field', async (_, more, path) => {
    const { status, body } = await manager.post<Refused>('/api/materials', sheet(more))
    expect(status).toBe(400)
    expect(body.fields.map(field => field.path)).toContain(path)
  })

  it('does it once for a request that is sent again', async () => {
    const body = sheet()
    const key = randomUUID()
    const first = await manager.post<Material>('/api/materials', body, { key })
    expect((await manager.post<Material>('/api/materials', body, { key })).body).toEqual(first.body)
  })
})

describe('PATCH /api/materials/{id}', () => {
  it('changes what is sent and leaves the rest', async () => {
    const material = await entered()
    const { status, body } = await manager.patch<Material>(`/api/materials/${material.id}`, { version: 1, pricePerKg: '12', hazardCodes: [] })
    expect(status).toBe(200)
    expect(body).toMatchObject({ pricePerKg: '12', hazards: [], name: material.name, densityGPerMl: '1.18', version: 2 })
  })

  it('answers a change to an older version with what stands now, who saved it and when', async () => {
    const { id } = await entered()
    await manager.patch(`/api/materials/${id}`, { version: 1, pricePerKg: '12' })
    const { status, body } = await manager.patch<Refused & { current: Material, changed: { name: string, at: string } }>(`/api/materials/${id}`, { version: 1, pricePerKg: '13' })
    expect(status).toBe(409)
    expect(body.code).toBe('version-conflict')
    expect(body.current).toMatchObject({ id, pricePerKg: '12', version: 2 })
    expect(body.changed.name).toMatch(/\S/)
    expect(Date.parse(body.changed.at)).toBeGreaterThan(Date.parse('2026-01-01'))
  })

  it('checks what is sent against what stands', async () => {
    const { id } = await entered()
    const { status, body } = await manager.patch<Refused>(`/api/materials/${id}`, { version: 1, vocPct: '40' })
    expect(status).toBe(400)
    expect(body.fields).toMatchObject([{ path: 'vocPct' }])
  })

  it('is 404 for what is not there and 403 for others', async () => {
    expect((await manager.patch(`/api/materials/${randomUUID()}`, { version: 1 })).status).toBe(404)
    const { id } = await entered()
    expect((await foreman.patch(`/api/materials/${id}`, { version: 1 })).status).toBe(403)
  })

  it('puts a material aside and back', async () => {
    const { id, code } = await entered()
    const aside = await manager.patch<Material>(`/api/materials/${id}`, { version: 1, archived: true })
    expect(aside.body.archived).toBe(true)
    expect((await manager.get<MaterialList>(`/api/materials?q=${code}`)).body.items).toEqual([])
    expect((await manager.get<MaterialList>(`/api/materials?archived=true&q=${code}`)).body.items).toHaveLength(1)
    expect((await manager.patch<Material>(`/api/materials/${id}`, { version: 2, archived: false })).body.archived).toBe(false)
  })

  it('refuses to put aside what a mix in use takes', async () => {
    const { body: { items } } = await manager.get<{ items: MixItem[] }>('/api/mixes')
    const taken = (await manager.get<{ current: { components: { materialId: string }[] } }>(`/api/mixes/${items[0]!.id}`)).body.current.components[0]!.materialId
    const { version } = (await manager.get<Material>(`/api/materials/${taken}`)).body
    const { status, body } = await manager.patch<Refused>(`/api/materials/${taken}`, { version, archived: true })
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'in-use', message: expect.stringContaining(items[0]!.code) as string })
  })

  it('refuses to forget the density that a mix by volume needs', async () => {
    const { id } = await entered()
    const made = await manager.post<{ id: string, version: number }>('/api/mixes', {
      code: `V-${mark()}`, name: 'By volume', basis: 'volume', components: [{ materialId: id, role: 'base', parts: '1', partsMax: null, tolerancePct: null, reactive: false }],
      potLifeMin: null, potLifeReferenceC: null, potLifeTable: null, halvesPerC: null, potLifeSource: null, lateFromPct: '75', inductionMin: '0', viscosity: null,
      densityGPerMl: null, volumeSolidsPct: null, leftoverSharePct: null, notes: null,
    })
    expect(made.status).toBe(201)
    const { status, body } = await manager.patch<Refused>(`/api/materials/${id}`, { version: 1, densityGPerMl: null })
    expect(status).toBe(422)
    expect(body).toMatchObject({ code: 'density-needed', fields: [{ path: 'densityGPerMl' }] })
    await manager.patch(`/api/mixes/${made.body.id}`, { version: made.body.version, archived: true })
  })
})

describe('DELETE /api/materials/{id}', () => {
  it('takes away what nothing refers to', async () => {
    const { id } = await entered()
    expect((await foreman.delete(`/api/materials/${id}`)).status).toBe(403)
    expect((await manager.delete(`/api/materials/${id}`)).status).toBe(204)
    expect((await manager.get(`/api/materials/${id}`)).status).toBe(404)
  })

  it('refuses what a lot refers to', async () => {
    const { body: { items } } = await manager.get<{ items: { materialId: string }[] }>('/api/lots')
    const { status, body } = await manager.delete<Refused>(`/api/materials/${items[0]!.materialId}`)
    expect(status).toBe(409)
    expect(body.code).toBe('in-use')
  })
})

describe('GET /api/hazard-statements', () => {
  it('lists every statement once to whoever may read materials, hazards first', async () => {
    const { status, body } = await sprayer.get<HazardStatementList>('/api/hazard-statements')
    expect(status).toBe(200)
    const kinds = body.items.map(item => item.kind)
    expect(kinds).toEqual([...kinds].sort((a, b) => ['H', 'EUH', 'P'].indexOf(a) - ['H', 'EUH', 'P'].indexOf(b)))
    expect(new Set(body.items.map(item => item.code)).size).toBe(body.items.length)
    expect(body.items.length).toBeGreaterThan(100)
  })
})
