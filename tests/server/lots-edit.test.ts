import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { BenchSnapshot } from '#shared/schemas/bench'
import type { Lot } from '#shared/schemas/lots'
import type { Material } from '#shared/schemas/materials'
import { createKnex } from '../../server/database/connection'
import type { Client} from './support/http';
import { enrolled, signedIn } from './support/http'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
afterAll(() => admin.destroy())

let manager: Client
let foreman: Client
let sprayer: Client
let material: Material
beforeAll(async () => {
  manager = await signedIn('manager')
  foreman = await signedIn('foreman')
  sprayer = await signedIn('sprayer')
  material = await newMaterial()
})

const mark = (): string => randomUUID().slice(0, 8)
type Refused = { code: string, message: string, fields: { path: string, message: string }[] }

async function newMaterial(more: Record<string, unknown> = {}): Promise<Material> {
  const { status, body } = await manager.post<Material>('/api/materials', {
    code: `L-${mark()}`, name: 'Material for lots', role: 'base', chemistry: 'nitrocellulose', containsIsocyanates: false, densityGPerMl: '0.95', solidsPct: null,
    volumeSolidsPct: null, reactsPct: null, vocGPerL: null, vocPct: null, waterPct: null, exemptPct: null, flashPointC: null, shelfLifeDays: null, supplier: null,
    makerCode: null, pricePerKg: null, signalWord: null, hazardCodes: [], protectionMixing: null, protectionSpraying: null, reorderPointG: null, ...more,
  })
  expect(status).toBe(201)
  return body
}

const delivery = (more: Record<string, unknown> = {}) => ({
  materialId: material.id, lotNumber: `K-${mark()}`, grams: '5000', litres: null, receivedOn: '2026-11-20', expiresOn: '2099-03-31', pricePerKg: '9.5', place: 'Paint store', ...more,
})

async function booked(more: Record<string, unknown> = {}): Promise<Lot> {
  const { status, body } = await sprayer.post<Lot>('/api/lots', delivery(more))
  expect(status, JSON.stringify(body)).toBe(201)
  return body
}

/** Lots that the bench does not refuse. */
const benchLots = async (): Promise<string[]> => (await sprayer.get<BenchSnapshot>('/api/bench/snapshot')).body.lots.filter(lot => lot.state !== 'blocked').map(lot => lot.id)

describe('POST /api/lots', () => {
  it('books a lot in with the movement that brings its grams, by whoever stands at the shelf', async () => {
    const lot = await booked()
    expect(lot).toMatchObject({ state: 'sealed', condition: 'sealed', stockG: '5000', receivedG: '5000', place: 'Paint store', expiresOn: '2099-03-31', version: 1 })
    expect(lot.movements).toMatchObject([{ kind: 'received', grams: '5000' }])
    expect(await benchLots()).toContain(lot.id)
  })

  it('weighs litres by the material\'s density', async () => {
    expect((await booked({ grams: null, litres: '2.5' })).stockG).toBe('2375')
  })

  it('refuses litres where the density is not known, beside the field', async () => {
    const bare = await newMaterial({ densityGPerMl: null })
    const { status, body } = await sprayer.post<Refused>('/api/lots', delivery({ materialId: bare.id, grams: null, litres: '1' }))
    expect(status).toBe(400)
    expect(body.fields).toMatchObject([{ path: 'litres', message: expect.stringContaining('density') as string }])
  })

  it('refuses a number that the material has already, whatever its case, and takes it for another material', async () => {
    const { lotNumber } = await booked()
    const { status, body } = await sprayer.post<Refused>('/api/lots', delivery({ lotNumber: lotNumber.toLowerCase() }))
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'duplicate', fields: [{ path: 'lotNumber' }] })
    await booked({ lotNumber, materialId: (await newMaterial()).id })
  })

  it('lets one of several bookings of one number through, when they come at once', async () => {
    const body = delivery()
    const answers = await Promise.all([1, 2, 3, 4].map(() => sprayer.post('/api/lots', body)))
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 409, 409, 409])
  })

  it.each<[string, Record<string, unknown>, string]>([
    ['no material', { materialId: '' }, 'materialId'],
    ['a material that is not there', { materialId: '00000000-0000-4000-8000-000000000000' }, 'materialId'],
    ['no number', { lotNumber: ' ' }, 'lotNumber'],
    ['no amount', { grams: null }, 'grams'],
    ['two amounts', { litres: '1' }, 'grams'],
    ['an amount of nothing', { grams: '0' }, 'grams'],
    ['grams with a comma', { grams: '1,5' }, 'grams'],
    ['a day to come', { receivedOn: '2099-01-01' }, 'receivedOn'],
    ['a day that is none', { expiresOn: '2026-02-30' }, 'expiresOn'],
  ])('refuses %s beside its field', async (_, more, path) => {
    const { status, body } = await sprayer.post<Refused>('/api/lots', delivery(more))
    expect(status).toBe(400)
    expect(body.fields.map(field => field.path)).toContain(path)
  })

  it('refuses a material that is put aside', async () => {
    const old = await newMaterial()
    await manager.patch(`/api/materials/${old.id}`, { version: 1, archived: true })
    expect((await sprayer.post<Refused>('/api/lots', delivery({ materialId: old.id }))).body.fields).toMatchObject([{ path: 'materialId' }])
  })

  it('needs a person: a bench alone may not', async () => {
    const { body } = await manager.get<{ items: { id: string }[] }>('/api/booths')
    expect((await (await enrolled('bench', body.items[0]!.id)).post('/api/lots', delivery())).status).toBe(403)
  })
})

describe('PATCH /api/lots/{id}', () => {
  it('puts slips of the pen right', async () => {
    const { id } = await booked()
    const { status, body } = await foreman.patch<Lot>(`/api/lots/${id}`, { version: 1, place: 'Bench 2', expiresOn: null })
    expect(status).toBe(200)
    expect(body).toMatchObject({ place: 'Bench 2', expiresOn: null, pricePerKg: '9.5', stockG: '5000', version: 2 })
  })

  it('is the foreman\'s, not the sprayer\'s', async () => {
    expect((await sprayer.patch(`/api/lots/${(await booked()).id}`, { version: 1, place: 'Bench 2' })).status).toBe(403)
  })

  it('answers an older version with what stands now and who saved it', async () => {
    const { id } = await booked()
    await foreman.patch(`/api/lots/${id}`, { version: 1, place: 'Bench 2' })
    const { status, body } = await manager.patch<Refused & { current: Lot, changed: { name: string } }>(`/api/lots/${id}`, { version: 1, place: 'Bench 3' })
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'version-conflict', current: { place: 'Bench 2', version: 2 }, changed: { name: expect.stringMatching(/\S/) as string } })
  })

  it('refuses another lot\'s number but takes its own', async () => {
    const [one, other] = [await booked(), await booked()]
    expect((await foreman.patch<Refused>(`/api/lots/${one.id}`, { version: 1, lotNumber: other.lotNumber })).body).toMatchObject({ code: 'duplicate', fields: [{ path: 'lotNumber' }] })
    expect((await foreman.patch(`/api/lots/${one.id}`, { version: 1, lotNumber: one.lotNumber.toLowerCase() })).status).toBe(200)
  })
})

describe('block and release', () => {
  it('takes a lot from the benches at once and gives it back, with the reasons in the record', async () => {
    const { id } = await booked()
    const blocked = await foreman.post<Lot>(`/api/lots/${id}/block`, { reason: 'Skin in the tin' })
    expect(blocked.status).toBe(200)
    expect(blocked.body).toMatchObject({ state: 'blocked', blockedReason: 'Skin in the tin' })
    expect(await benchLots()).not.toContain(id)
    expect(await admin('events').where({ type: 'lot', subject: `lot:${id}` })).toHaveLength(2)

    const released = await foreman.post<Lot>(`/api/lots/${id}/release`, { reason: 'Strained, sound' })
    expect(released.body).toMatchObject({ state: 'sealed', blockedReason: null })
    expect(released.body.events.map(event => [event.kind, event.reason]).sort()).toEqual([['blocked', 'Skin in the tin'], ['released', 'Strained, sound']])
    expect(await benchLots()).toContain(id)
  })

  it('wants a reason, a foreman, and a lot that is the other way', async () => {
    const { id } = await booked()
    expect((await foreman.post<Refused>(`/api/lots/${id}/block`, { reason: ' ' })).body.fields).toMatchObject([{ path: 'reason' }])
    expect((await sprayer.post(`/api/lots/${id}/block`, { reason: 'x' })).status).toBe(403)
    expect((await foreman.post(`/api/lots/${id}/release`, { reason: 'x' })).body).toMatchObject({ code: 'not-blocked' })
    await foreman.post(`/api/lots/${id}/block`, { reason: 'x' })
    const again = await foreman.post(`/api/lots/${id}/block`, { reason: 'x' })
    expect([again.status, again.body.code]).toEqual([409, 'already-blocked'])
    expect((await foreman.post(`/api/lots/${randomUUID()}/block`, { reason: 'x' })).status).toBe(404)
  })
})

describe('POST /api/lots/{id}/movements', () => {
  const move = (id: string, kind: string, grams: string) => foreman.post<Lot & Refused>(`/api/lots/${id}/movements`, { kind, grams, reason: 'Weighed on the shelf' })

  it('writes the difference to the books when a tin is counted', async () => {
    const { id } = await booked()
    await admin('lots').where({ id }).update({ count_needed: true })
    const { status, body } = await move(id, 'counted', '4750.5')
    expect(status).toBe(201)
    expect(body).toMatchObject({ stockG: '4750.5', receivedG: '5000', countNeeded: false })
    expect(body.movements.map(({ kind, grams, reason }) => [kind, grams, reason])).toContainEqual(['counted', '-249.5', 'Weighed on the shelf'])
  })

  it('lifts a lot that more was poured from than the books had', async () => {
    const { id } = await booked()
    await admin('lot_movements').insert({ id: randomUUID(), lot_id: id, kind: 'poured', grams: '-5100', at: new Date(), created_at: new Date() })
    expect((await move(id, 'counted', '40')).body.stockG).toBe('40')
  })

  it('is used up when nothing is left, and back when more comes', async () => {
    const { id } = await booked()
    expect((await move(id, 'counted', '0')).body).toMatchObject({ state: 'empty', stockG: '0' })
    expect((await move(id, 'received', '2500')).body).toMatchObject({ state: 'sealed', stockG: '2500', receivedG: '7500' })
  })

  it('throws away no more than there is, and notes the waste by chemistry', async () => {
    const { id } = await booked()
    const { status, body } = await move(id, 'wasted', '5000.1')
    expect(status).toBe(422)
    expect(body).toMatchObject({ code: 'stock-negative', fields: [{ path: 'grams' }] })
    expect((await move(id, 'wasted', '5000')).body).toMatchObject({ state: 'empty', stockG: '0' })
    const waste = await admin('waste_entries').where({ lot_id: id }).select<{ grams: string, chemistry: string, disposal: string }[]>('grams', 'chemistry', 'disposal')
    expect(waste).toEqual([{ grams: '5000.0000', chemistry: 'nitrocellulose', disposal: 'nitro-metal-can' }])
  })

  it('leaves a blocked lot blocked', async () => {
    const { id } = await booked()
    await foreman.post(`/api/lots/${id}/block`, { reason: 'Skin in the tin' })
    expect((await move(id, 'counted', '10')).body).toMatchObject({ state: 'blocked', blockedReason: 'Skin in the tin' })
  })

  it.each([['counted', '-1', 'grams'], ['received', '0', 'grams'], ['poured', '1', 'kind']])('refuses %s %s', async (kind, grams, path) => {
    const { status, body } = await move((await booked()).id, kind, grams)
    expect(status).toBe(400)
    expect(body.fields.map(field => field.path)).toContain(path)
  })

  it('is the foreman\'s, not the sprayer\'s', async () => {
    expect((await sprayer.post(`/api/lots/${(await booked()).id}/movements`, { kind: 'counted', grams: '1', reason: 'x' })).status).toBe(403)
  })
})
