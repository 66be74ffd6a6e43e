import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { BenchSnapshot } from '#shared/schemas/bench'
import type { LiveSnapshot } from '#shared/schemas/live'
import type { Booth, Gun, MixingCup, Scale } from '#shared/schemas/shop'
import { createKnex } from '../../server/database/connection'
import { type Client, signedIn, signedInOften } from './support/http'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '')
let foreman: Client
beforeAll(async () => {
  foreman = await signedInOften('foreman')
})
afterAll(() => admin.destroy())

const word = () => `T ${randomUUID().slice(0, 8)}`
const booth = (more: object = {}) => ({ name: word(), clearanceMeasured: true, clearanceMin: '22.5', ...more })
const gun = (more: object = {}) => ({
  name: word(), kind: 'cup-gun', nozzleMm: '1.3', boothId: null, efficiencyFlatPct: '60', efficiencyFramesPct: '45.5', efficiencySticksPct: '30',
  efficiencyMeasured: false, residueG: '24', smallestFillG: '0', flowGPerMin: null, paceM2PerH: null, ...more,
})
const scale = (more: object = {}) => ({
  name: word(), source: 'keypad', divisionG: '0.1', capacityG: '6200', mpeG: null, accuracyClass: null, verificationIntervalG: null, nextCheckOn: null, ...more,
})
const cup = (more: object = {}) => ({ name: word(), capacityMl: '1000', fillLineMl: '850', ...more })

const fieldsOf = (body: unknown) => (body as { fields: { path: string }[] }).fields.map(({ path }) => path)
const made = async <T>(path: string, body: object) => (await foreman.post<T>(path, body)).body

describe('entering what a shop works with', () => {
  it.each([['/api/booths', booth()], ['/api/guns', gun()], ['/api/scales', scale({ source: 'simulated' })], ['/api/mixing-cups', cup()]])('%s keeps all that was sent', async (path, body) => {
    const { status, body: answer } = await foreman.post<{ id: string }>(path, body)
    expect(status).toBe(201)
    expect(answer).toMatchObject({ ...body, active: true, version: 1 })
    expect((await foreman.get(`${path}/${answer.id}`)).body).toEqual(answer)
  })

  it('lets 30 min stand for a clearance that nobody measured', async () => {
    expect(await made<Booth>('/api/booths', booth({ clearanceMeasured: false, clearanceMin: null }))).toMatchObject({ clearanceMin: '30', clearanceMeasured: false })
  })

  it.each([
    ['a booth without a name', '/api/booths', booth({ name: ' ' }), 'name'],
    ['a measured clearance without minutes', '/api/booths', booth({ clearanceMin: null }), 'clearanceMin'],
    ['a clearance of nothing', '/api/booths', booth({ clearanceMin: '0' }), 'clearanceMin'],
    ['an efficiency of nothing', '/api/guns', gun({ efficiencyFlatPct: '0' }), 'efficiencyFlatPct'],
    ['an efficiency above all', '/api/guns', gun({ efficiencySticksPct: '100.5' }), 'efficiencySticksPct'],
    ['a comma', '/api/guns', gun({ residueG: '24,5' }), 'residueG'],
    ['a number of JSON', '/api/guns', gun({ residueG: 24 }), 'residueG'],
    ['a booth that is not there', '/api/guns', gun({ boothId: randomUUID() }), 'boothId'],
    ['a class without its interval', '/api/scales', scale({ accuracyClass: 'II' }), 'verificationIntervalG'],
    ['an interval without a class', '/api/scales', scale({ verificationIntervalG: '0.1' }), 'accuracyClass'],
    ['an interval below the division', '/api/scales', scale({ accuracyClass: 'II', verificationIntervalG: '0.01' }), 'verificationIntervalG'],
    ['a capacity below one division', '/api/scales', scale({ capacityG: '0.05', divisionG: '0.1' }), 'capacityG'],
    ['a day that is none', '/api/scales', scale({ nextCheckOn: '2026-02-30' }), 'nextCheckOn'],
    ['a fill line above the rim', '/api/mixing-cups', cup({ fillLineMl: '1000.5' }), 'fillLineMl'],
  ])('refuses %s beside the field', async (_what, path, body, field) => {
    const { status, body: answer } = await foreman.post(path, body)
    expect(status).toBe(400)
    expect(fieldsOf(answer)).toContain(field)
  })

  it('refuses a name that is taken, also in other letters', async () => {
    const first = await made<Gun>('/api/guns', gun())
    const { status, body } = await foreman.post('/api/guns', gun({ name: first.name.toLowerCase() }))
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'duplicate', fields: [{ path: 'name' }] })
  })

  it('makes one gun of a body that is sent again under its key', async () => {
    const key = randomUUID()
    const body = gun()
    const answers = [await foreman.post<Gun>('/api/guns', body, { key }), await foreman.post<Gun>('/api/guns', body, { key })]
    expect(answers[1]?.body).toEqual(answers[0]?.body)
    expect(await admin('guns').where({ name: body.name }).pluck('id')).toHaveLength(1)
  })

  it('is refused to a sprayer', async () => {
    const sprayer = await signedIn('sprayer')
    expect((await sprayer.post('/api/guns', gun())).status).toBe(403)
  })

  it('writes one audit entry without the name and tells the screens', async () => {
    const body = scale()
    const { id } = await made<Scale>('/api/scales', body)
    const entries = await admin('audit_entries').where({ subject: `scale:${id}` }).select<Record<string, unknown>[]>('*')
    expect(entries).toHaveLength(1)
    expect(entries[0]).toMatchObject({ action: 'scale.created' })
    expect(JSON.stringify(entries)).not.toContain(body.name)
    expect(await admin('events').where({ subject: `scale:${id}` }).pluck('type')).toEqual(['shop'])
  })
})

describe('changing it', () => {
  it('changes what is sent and leaves the rest', async () => {
    const before = await made<Gun>('/api/guns', gun())
    const { status, body } = await foreman.patch<Gun>(`/api/guns/${before.id}`, { version: 1, paceM2PerH: '9.5' })
    expect(status).toBe(200)
    expect(body).toEqual({ ...before, paceM2PerH: '9.5', version: 2 })
  })

  it('answers what stands now, who saved it and when, to a change of an older version', async () => {
    const before = await made<MixingCup>('/api/mixing-cups', cup())
    const manager = await signedIn('manager')
    const { body: now } = await manager.patch<MixingCup>(`/api/mixing-cups/${before.id}`, { version: 1, fillLineMl: '800' })
    const { status, body } = await foreman.patch(`/api/mixing-cups/${before.id}`, { version: 1, fillLineMl: '700' })
    expect(status).toBe(409)
    expect(body).toMatchObject({ code: 'version-conflict', current: now, changed: { name: expect.stringMatching(/\S/) as string } })
  })

  it('judges a part together with what stands', async () => {
    const { id } = await made<MixingCup>('/api/mixing-cups', cup())
    const { status, body } = await foreman.patch(`/api/mixing-cups/${id}`, { version: 1, capacityMl: '500' })
    expect(status).toBe(400)
    expect(fieldsOf(body)).toEqual(['fillLineMl'])
  })

  it('knows no others', async () => {
    expect((await foreman.patch(`/api/scales/${randomUUID()}`, { version: 1, name: 'x' })).status).toBe(404)
  })
})

describe('taking it out of use', () => {
  it('leaves the lists of choices and stays readable, and comes back', async () => {
    const { id } = await made<Gun>('/api/guns', gun())
    const onBench = async () => (await foreman.get<BenchSnapshot>('/api/bench/snapshot')).body.guns.some((one) => one.id === id)
    const listed = async (query: string) => (await foreman.get<{ items: Gun[] }>(`/api/guns?limit=200${query}`)).body.items.some((one) => one.id === id)
    expect(await onBench()).toBe(true)
    await foreman.patch(`/api/guns/${id}`, { version: 1, active: false })
    expect([await onBench(), await listed(''), await listed('&inactive=true')]).toEqual([false, false, true])
    expect((await foreman.get(`/api/guns/${id}`)).body).toMatchObject({ active: false, version: 2 })
    await foreman.patch(`/api/guns/${id}`, { version: 2, active: true })
    expect([await onBench(), await listed('&inactive=true')]).toEqual([true, false])
  })

  it('waits for the pots of a booth to be emptied', async () => {
    const { body: live } = await foreman.get<LiveSnapshot>('/api/live')
    const pot = live.pots.find(({ boothId, stage, state }) => boothId !== null && stage === 'sealed' && state !== 'no-pot-life')
    expect(pot).toBeDefined()
    const { body: its } = await foreman.get<Booth>(`/api/booths/${pot?.boothId}`)
    const { status, body } = await foreman.patch(`/api/booths/${its.id}`, { version: its.version, active: false })
    expect([status, body.code]).toEqual([409, 'in-use'])
  })

  it('deletes what was never used and nothing else', async () => {
    const fresh = await made<Gun>('/api/guns', gun())
    expect((await foreman.delete(`/api/guns/${fresh.id}`)).status).toBe(204)
    expect((await foreman.get(`/api/guns/${fresh.id}`)).status).toBe(404)
    const used = await admin('batches').whereNotNull('gun_id').first<{ gun_id: string }>('gun_id')
    const { status, body } = await foreman.delete(`/api/guns/${used.gun_id}`)
    expect([status, body.code]).toEqual([409, 'in-use'])
    expect((await foreman.get(`/api/guns/${used.gun_id}`)).status).toBe(200)
  })
})

describe('what holds for the whole shop', () => {
  it('is read and changed by a manager alone', async () => {
    expect((await foreman.get('/api/settings')).status).toBe(403)
    const manager = await signedIn('manager')
    const { body: before } = await manager.get<{ version: number, currency: string | null }>('/api/settings')
    const { status, body } = await manager.patch<{ version: number }>('/api/settings', { version: before.version, currency: 'sek' })
    expect([status, body]).toEqual([200, { ...before, currency: 'SEK', version: before.version + 1 }])
    expect((await foreman.get('/api/session')).body).toMatchObject({ shop: { currency: 'SEK' } })
    const late = await manager.patch('/api/settings', { version: before.version, currency: null })
    expect([late.status, late.body]).toMatchObject([409, { code: 'version-conflict', current: body }])
    expect((await manager.patch('/api/settings', { version: body.version, currency: before.currency })).status).toBe(200)
  })

  it.each([['zone', 'Europe/Nowhere'], ['currency', 'XQQ'], ['currency', 'EURO'], ['name', '']])('refuses %s %s beside the field', async (field, value) => {
    const manager = await signedIn('manager')
    const { body: before } = await manager.get<{ version: number }>('/api/settings')
    const { status, body } = await manager.patch('/api/settings', { version: before.version, [field]: value })
    expect(status).toBe(400)
    expect(fieldsOf(body)).toEqual([field])
  })
})
