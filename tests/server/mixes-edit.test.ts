import { randomUUID } from 'node:crypto'
import { beforeAll, describe, expect, it } from 'vitest'
import type { BenchSnapshot } from '#shared/schemas/bench'
import type { Material, MaterialItem } from '#shared/schemas/materials'
import type { Mix, MixItem } from '#shared/schemas/mixes'
import type { Client} from './support/http';
import { signedIn } from './support/http'

let manager: Client
let foreman: Client
let materials: Record<'base' | 'hardener' | 'thinner' | 'peroxide', MaterialItem>
beforeAll(async () => {
  manager = await signedIn('manager')
  foreman = await signedIn('foreman')
  const { body: { items } } = await manager.get<{ items: MaterialItem[] }>('/api/materials?limit=200')
  const of = (role: string) => items.find(item => item.role === role)!
  materials = { base: of('base'), hardener: of('hardener'), thinner: of('thinner'), peroxide: of('peroxide') }
})

type Refused = { code: string, message: string, fields: { path: string, message: string }[] }
type Role = keyof typeof materials
const part = (role: Role, parts: string, more: Record<string, unknown> = {}) =>
  ({ materialId: materials[role].id, role, parts, partsMax: null, tolerancePct: null, reactive: role === 'hardener' || role === 'peroxide', ...more })

const revision = (more: Record<string, unknown> = {}) => ({
  basis: 'weight', components: [part('base', '100'), part('hardener', '50'), part('thinner', '20', { partsMax: '30' })], potLifeMin: '240', potLifeReferenceC: '20',
  potLifeTable: null, halvesPerC: null, potLifeSource: 'Data sheet', lateFromPct: '75', inductionMin: '5', viscosity: { cup: 'din-4', secondsMin: '18', secondsMax: '22', atC: '20' },
  densityGPerMl: null, volumeSolidsPct: null, leftoverSharePct: null, notes: 'Strain it.', ...more,
})
const named = (more: Record<string, unknown> = {}) => ({ code: `X-${randomUUID().slice(0, 8)}`, name: 'Mix for a test', ...revision(), ...more })

async function made(more: Record<string, unknown> = {}): Promise<Mix> {
  const { status, body } = await manager.post<Mix>('/api/mixes', named(more))
  expect(status, JSON.stringify(body)).toBe(201)
  return body
}

describe('POST /api/mixes', () => {
  it('makes a mix with its first revision, in pouring order, and the bench offers it', async () => {
    const mix = await made()
    expect(mix.current).toMatchObject({ number: 1, basis: 'weight', potLifeIs: 'single', potLifeMin: '240', inductionMin: '5', notes: 'Strain it.' })
    expect(mix.current?.components.map(({ role, parts, partsMax }) => [role, parts, partsMax])).toEqual([['base', '100', null], ['hardener', '50', null], ['thinner', '20', '30']])
    const { body } = await foreman.get<BenchSnapshot>('/api/bench/snapshot')
    expect(body.mixes.find(one => one.id === mix.id)).toMatchObject({ revisionId: mix.current?.id, revisionNumber: 1 })
  })

  it('is the manager\'s alone', async () => {
    expect((await foreman.post('/api/mixes', named())).status).toBe(403)
  })

  it('refuses a code that is taken, beside the field', async () => {
    const { code } = await made()
    const { status, body } = await manager.post<Refused>('/api/mixes', named({ code: code.toLowerCase() }))
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'duplicate', fields: [{ path: 'code' }] })
  })

  it.each<[string, () => Record<string, unknown>, string]>([
    ['no component', () => ({ components: [] }), 'components'],
    ['nine components', () => ({ components: Array.from({ length: 9 }, () => part('base', '1')) }), 'components'],
    ['no parts', () => ({ components: [part('base', '0')] }), 'components.0.parts'],
    ['a material that is not there', () => ({ components: [part('base', '100', { materialId: randomUUID() })] }), 'components.0.materialId'],
    ['no base', () => ({ components: [part('thinner', '1')], potLifeMin: null, potLifeReferenceC: null }), 'components'],
    ['a peroxide by another name', () => ({ components: [part('base', '100'), part('peroxide', '2', { role: 'hardener' })] }), 'components.1.role'],
    ['a peroxide without the sheet\'s tolerance', () => ({ components: [part('base', '100'), part('peroxide', '2')] }), 'components.1.tolerancePct'],
    ['a hardener without a pot life', () => ({ potLifeMin: null, potLifeReferenceC: null }), 'potLifeMin'],
    ['a table that grows warmer', () => ({ potLifeMin: null, potLifeReferenceC: null, potLifeTable: [{ c: '20', min: '60' }, { c: '30', min: '90' }] }), 'potLifeTable'],
    ['a cup that is none', () => ({ viscosity: { cup: 'mug', secondsMin: null, secondsMax: null, atC: null } }), 'viscosity.cup'],
    ['a share above the whole', () => ({ lateFromPct: '120' }), 'lateFromPct'],
  ])('refuses %s beside its field', async (_, more, path) => {
    const { status, body } = await manager.post<Refused>('/api/mixes', named(more()))
    expect(status).toBe(400)
    expect(body.fields.map(field => field.path)).toContain(path)
  })

  it('refuses a ratio by volume where a density is missing, beside the material', async () => {
    const bare = await manager.post<Material>('/api/materials', {
      code: `D-${randomUUID().slice(0, 8)}`, name: 'No density', role: 'thinner', chemistry: 'polyurethane', containsIsocyanates: false, densityGPerMl: null, solidsPct: null,
      volumeSolidsPct: null, reactsPct: null, vocGPerL: null, vocPct: null, waterPct: null, exemptPct: null, flashPointC: null, shelfLifeDays: null, supplier: null,
      makerCode: null, pricePerKg: null, signalWord: null, hazardCodes: [], protectionMixing: null, protectionSpraying: null, reorderPointG: null,
    })
    const { status, body } = await manager.post<Refused>('/api/mixes', named({
      basis: 'volume', components: [part('base', '2'), part('hardener', '1'), part('thinner', '1', { materialId: bare.body.id })],
    }))
    expect(status).toBe(400)
    expect(body.fields).toMatchObject([{ path: 'components.2.materialId', message: expect.stringContaining('density') as string }])
  })
})

describe('POST /api/mixes/{id}/revisions', () => {
  it('writes the next one; the one before stays as it was and readable', async () => {
    const mix = await made()
    const { status, body } = await manager.post<Mix>(`/api/mixes/${mix.id}/revisions`, { version: mix.version, ...revision({ potLifeMin: '180', components: [part('base', '100'), part('hardener', '25')] }) })
    expect(status).toBe(201)
    expect(body.current).toMatchObject({ number: 2, potLifeMin: '180' })
    expect(body.revisions.map(({ number }) => number)).toEqual([2, 1])
    const old = await foreman.get<Mix>(`/api/mixes/${mix.id}?revisionId=${mix.current?.id}`)
    expect(old.body.shown).toEqual(mix.current)
    expect(old.body.current?.number).toBe(2)
    expect((await foreman.get<Mix>(`/api/mixes/${mix.id}`)).body.shown).toEqual(body.current)
  })

  it('is written once when two people write it at once; the other gets what stands now', async () => {
    const mix = await made()
    const send = () => manager.post<Refused & { current: Mix, changed: { name: string } }>(`/api/mixes/${mix.id}/revisions`, { version: mix.version, ...revision() })
    const answers = await Promise.all([send(), send()])
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409])
    const refused = answers.find(({ status }) => status === 409)!.body
    expect(refused).toMatchObject({ code: 'version-conflict', current: { current: { number: 2 } }, changed: { name: expect.stringMatching(/\S/) as string } })
  })

  it('is 403 for others, 404 for no mix, and 404 for a revision of another mix', async () => {
    const [mix, other] = [await made(), await made()]
    expect((await foreman.post(`/api/mixes/${mix.id}/revisions`, { version: 1, ...revision() })).status).toBe(403)
    expect((await manager.post(`/api/mixes/${randomUUID()}/revisions`, { version: 1, ...revision() })).status).toBe(404)
    expect((await manager.get(`/api/mixes/${mix.id}?revisionId=${other.current?.id}`)).status).toBe(404)
  })

  it('lets a pot that was begun by the revision before go on', async () => {
    const mix = await made()
    const snapshot = (await foreman.get<BenchSnapshot>('/api/bench/snapshot')).body
    const user = (await foreman.get<{ user: { id: string } }>('/api/session')).body.user
    const id = randomUUID()
    const draft = (seq: number) => ({
      seq, planId: randomUUID(), potNumber: 1, potCount: 1, mixRevisionId: mix.current!.id, jobStepId: null, purpose: 'Test panels', pieceIds: [], boothId: snapshot.booths[0]!.id,
      gunId: snapshot.guns[0]!.id, scaleId: snapshot.scales[0]!.id, mixedByUserId: user.id, plan: {
        mix: { basis: 'weight', components: mix.current!.components.map(({ materialCode, parts, role, reactive }) => ({ name: materialCode, parts, role, reactive })) },
        totalG: '800', scaleDivisionG: snapshot.scales[0]!.divisionG,
      }, components: [], corrections: [], reactiveAt: null, device: null, climate: null, viscosity: null, approvals: [],
    })
    const first = await foreman.put(`/api/batch-drafts/${id}`, draft(1))
    expect([200, 201].includes(first.status), JSON.stringify(first.body)).toBe(true)
    await manager.post(`/api/mixes/${mix.id}/revisions`, { version: mix.version, ...revision({ components: [part('base', '100'), part('hardener', '10')] }) })
    const second = await foreman.put<{ mixRevisionId: string }>(`/api/batch-drafts/${id}`, draft(2))
    expect([200, 201].includes(second.status), JSON.stringify(second.body)).toBe(true)
    expect(second.body.mixRevisionId).toBe(mix.current!.id)
  })
})

describe('PATCH /api/mixes/{id}', () => {
  it('renames a mix and leaves its revision', async () => {
    const mix = await made()
    const { body } = await manager.patch<Mix>(`/api/mixes/${mix.id}`, { version: mix.version, name: 'Another name' })
    expect(body).toMatchObject({ name: 'Another name', code: mix.code, current: { id: mix.current?.id } })
  })

  it('puts a mix aside, off the bench, and back', async () => {
    const mix = await made()
    const aside = await manager.patch<Mix>(`/api/mixes/${mix.id}`, { version: mix.version, archived: true })
    expect(aside.body.archived).toBe(true)
    expect((await foreman.get<BenchSnapshot>('/api/bench/snapshot')).body.mixes.some(one => one.id === mix.id)).toBe(false)
    expect((await manager.patch<Mix>(`/api/mixes/${mix.id}`, { version: aside.body.version, archived: false })).body.archived).toBe(false)
  })

  it('refuses to put aside what a released schedule sprays', async () => {
    const { body: { items } } = await manager.get<{ items: MixItem[] }>('/api/mixes?limit=200')
    const mixes = await Promise.all(items.map(async ({ id }) => (await manager.get<Mix>(`/api/mixes/${id}`)).body))
    const sprayed = mixes.find(mix => mix.schedules.length > 0)!
    const { status, body } = await manager.patch<Refused>(`/api/mixes/${sprayed.id}`, { version: sprayed.version, archived: true })
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'in-use', message: expect.stringContaining(sprayed.schedules[0]!.code) as string })
  })

  it('answers an older version with what stands now, refuses a taken code and is 403 for others', async () => {
    const [mix, other] = [await made(), await made()]
    expect((await manager.patch<Refused>(`/api/mixes/${mix.id}`, { version: mix.version, code: other.code })).body).toMatchObject({ code: 'duplicate', fields: [{ path: 'code' }] })
    await manager.patch(`/api/mixes/${mix.id}`, { version: mix.version, name: 'Saved first' })
    expect((await manager.patch(`/api/mixes/${mix.id}`, { version: mix.version, name: 'Saved second' })).body).toMatchObject({ code: 'version-conflict', current: { name: 'Saved first' } })
    expect((await foreman.patch(`/api/mixes/${mix.id}`, { version: mix.version })).status).toBe(403)
  })
})
