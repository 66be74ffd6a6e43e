import { randomUUID } from 'node:crypto'
import { Readable } from 'node:stream'
import type { ReadableStream } from 'node:stream/web'
import { afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { BenchSnapshot } from '#shared/schemas/bench'
import { BenchSnapshot as BenchSnapshotSchema } from '#shared/schemas/bench'
import { LiveSnapshot } from '#shared/schemas/live'
import { Timer, type Timer as TimerShape } from '#shared/schemas/timers'
import * as z from 'zod/mini'
import { baseUrl, Client, enrolled, signedIn } from './support/http'
import { Ear } from './support/live'

let sprayer: Client
let manager: Client
let booths: { id: string; name: string }[]
const open: AbortController[] = []

beforeAll(async () => {
  sprayer = await signedIn('sprayer')
  manager = await signedIn('manager')
  booths = (await manager.get<{ items: { id: string; name: string }[] }>('/api/booths')).body.items
})
afterEach(() => {
  for (const controller of open.splice(0)) controller.abort()
})

/** Opens the event stream as a browser would. */
async function listen(client: Client, query = '', headers: Record<string, string> = {}) {
  const controller = new AbortController()
  open.push(controller)
  const answer = await fetch(`${baseUrl}/api/events${query}`, { headers: { cookie: client.cookieHeader(), ...headers }, signal: controller.signal })
  const ear = new Ear(Readable.fromWeb(answer.body as ReadableStream))
  return { answer, ear, close: () => controller.abort() }
}

const makeTimer = async (client: Client, name: string, boothId: string | null = null) =>
  (await client.post<TimerShape>('/api/timers', { name, minutes: 60, boothId })).body
const about = (ear: Ear, { id }: { id: string }) => ear.events.filter(({ subject }) => subject === `timer:${id}`)

describe('the clock', () => {
  it('is told in UTC with milliseconds to everybody who is signed in', async () => {
    const { status, body } = await sprayer.get<{ now: string }>('/api/time')
    expect(status).toBe(200)
    expect(body.now).toMatch(/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/)
    expect((await new Client().get('/api/time')).status).toBe(401)
  })
})

describe('the stream over HTTP', () => {
  it('is not to be kept, packed or held back on the way, and begins with the server\'s clock', async () => {
    const { answer, ear } = await listen(sprayer)
    expect(answer.status).toBe(200)
    expect(answer.headers.get('content-type')).toMatch(/^text\/event-stream/)
    expect(answer.headers.get('cache-control')).toBe('no-store, no-transform')
    expect(answer.headers.get('x-accel-buffering')).toBe('no')
    await ear.until(() => ear.named('beat').length === 1)
    expect(ear.raw.join('')).toMatch(/^retry: \d+\n\n/)
  })

  it('brings what is done, and what was missed to one who comes back with its last number', async () => {
    const first = await listen(sprayer)
    const before = await makeTimer(sprayer, 'Heard')
    await first.ear.until(() => about(first.ear, before).length === 1)
    const last = String(about(first.ear, before)[0]?.seq)
    first.close()
    const missed = await makeTimer(sprayer, 'Missed')
    const byHeader = await listen(sprayer, '', { 'last-event-id': last })
    const byQuery = await listen(sprayer, `?lastEventId=${last}`)
    for (const { ear } of [byHeader, byQuery]) {
      await ear.until(() => about(ear, missed).length === 1)
      expect(about(ear, before)).toEqual([])
    }
  })

  it('continues a snapshot without a gap', async () => {
    const { body } = await sprayer.get<LiveSnapshot>('/api/live')
    const made = await makeTimer(sprayer, 'Between')
    const { ear } = await listen(sprayer, `?lastEventId=${body.lastSeq}`)
    await ear.until(() => about(ear, made).length === 1)
  })

  it('ends when its session ends', async () => {
    const leaving = await signedIn('sprayer')
    const { ear } = await listen(leaving)
    await ear.until(() => ear.named('beat').length === 1)
    await leaving.delete('/api/session')
    await ear.until(() => ear.ended)
  })

  it('ends when its screen is taken away', async () => {
    const screen = await enrolled('screen', booths[0]?.id ?? '')
    const { body } = await screen.get<{ device: { id: string } }>('/api/session')
    const { ear } = await listen(screen)
    await ear.until(() => ear.named('beat').length === 1)
    await manager.delete(`/api/devices/${body.device.id}`)
    await ear.until(() => ear.ended)
  })

  it('gives a screen its own booth, whatever it leaves out, and refuses another', async () => {
    const [mine, other] = booths
    const screen = await enrolled('screen', mine?.id ?? '')
    const { ear } = await listen(screen)
    await ear.until(() => ear.named('beat').length === 1)
    const theirs = await makeTimer(sprayer, 'Theirs', other?.id)
    const ours = await makeTimer(sprayer, 'Ours', mine?.id)
    await ear.until(() => about(ear, ours).length === 1)
    expect(about(ear, theirs)).toEqual([])
    expect((await screen.get(`/api/live?boothId=${other?.id}`)).status).toBe(403)
    expect((await screen.get(`/api/events?boothId=${other?.id}`)).status).toBe(403)
  })

  it('is refused to nobody\'s browser and to numbers that are none', async () => {
    expect((await new Client().get('/api/events')).status).toBe(401)
    expect((await sprayer.get('/api/events?lastEventId=-1')).status).toBe(400)
    expect((await sprayer.get('/api/events?boothId=1')).status).toBe(400)
  })
})

describe('snapshots', () => {
  it('of what runs have the shape that is promised', async () => {
    const { status, body } = await sprayer.get('/api/live')
    expect(status).toBe(200)
    expect(z.safeParse(LiveSnapshot, body).error).toBeUndefined()
  })

  it('of the bench have the shape that is promised and lots that expire first come first', async () => {
    const { status, body } = await sprayer.get<BenchSnapshot>('/api/bench/snapshot')
    expect(status).toBe(200)
    expect(z.safeParse(BenchSnapshotSchema, body).error).toBeUndefined()
    expect(body.mixes.length).toBeGreaterThan(0)
    const days = body.lots.map(({ expiresOn }) => expiresOn ?? '9999')
    expect(days).toEqual([...days].sort())
    // What must not be poured is there to be refused by name; the bench tells it by its day and its state.
    expect(days.some((day) => day < body.serverNow.slice(0, 10))).toBe(true)
    const screen = await enrolled('screen', booths[0]?.id ?? '')
    expect((await screen.get('/api/bench/snapshot')).status).toBe(403)
  })
})

describe('timers over HTTP', () => {
  it('are made once however often the same request arrives', async () => {
    const key = randomUUID()
    const body = { name: 'Twice', minutes: 5 }
    const [first, second] = await Promise.all([sprayer.post<TimerShape>('/api/timers', body, { key }), sprayer.post<TimerShape>('/api/timers', body, { key })])
    expect([first.status, second.status]).toEqual([201, 201])
    expect(second.body).toEqual(first.body)
    expect(z.safeParse(Timer, first.body).error).toBeUndefined()
  })

  it('refuse what makes no sense, beside the field', async () => {
    const path = (answer: { body: unknown }) => (answer.body as { fields: { path: string }[] }).fields[0]?.path
    for (const [body, field] of [[{ name: ' ', minutes: 5 }, 'name'], [{ name: 'x', minutes: 0 }, 'minutes'], [{ name: 'x', minutes: 1.5 }, 'minutes'], [{ name: 'x', minutes: 5, boothId: '1' }, 'boothId']] as const) {
      const answer = await sprayer.post('/api/timers', body)
      expect([answer.status, path(answer)]).toEqual([400, field])
    }
  })

  it('can be extended and done, and not silenced before they ring', async () => {
    const timer = await makeTimer(sprayer, 'Mine')
    expect((await sprayer.post(`/api/timers/${timer.id}/extend`, { minutes: 5 })).status).toBe(200)
    expect(await sprayer.post(`/api/timers/${timer.id}/silence`, {})).toMatchObject({ status: 422, body: { code: 'timer-not-fired' } })
    expect(await sprayer.post(`/api/timers/${timer.id}/done`, {})).toMatchObject({ status: 200, body: { state: 'done' } })
    expect((await sprayer.post(`/api/timers/${randomUUID()}/acknowledge`, {})).status).toBe(404)
    const screen = await enrolled('screen', booths[0]?.id ?? '')
    expect((await screen.post('/api/timers', { name: 'No', minutes: 5 })).status).toBe(403)
  })
})

describe('climate over HTTP', () => {
  it('works out the dew point and tells the booth\'s screens', async () => {
    const boothId = booths[0]?.id ?? ''
    const screen = await enrolled('screen', boothId)
    const { ear } = await listen(screen)
    await ear.until(() => ear.named('beat').length === 1)
    const { status, body } = await sprayer.post('/api/climate-readings', { boothId, airC: '20', rhPct: '50', surfaceC: '11.5' })
    expect(status).toBe(201)
    // Magnus with 17.62 and 243.12 °C (WMO-No. 8): 9.26 °C at 20 °C and 50 %.
    expect(body).toMatchObject({ boothId, airC: '20', rhPct: '50', surfaceC: '11.5', dewPointC: '9.26', ok: false })
    await ear.until(() => ear.events.some(({ type }) => type === 'climate'))
    expect(ear.events.find(({ type }) => type === 'climate')?.payload).toEqual(body)
    const { body: list } = await sprayer.get<{ items: unknown[]; nextCursor: string | null }>(`/api/climate-readings?boothId=${boothId}&limit=1`)
    expect(list.items).toEqual([body])
  })

  it('tells a booth\'s screen of its own booth only', async () => {
    const [own, other] = booths.map(({ id }) => id)
    const screen = await enrolled('screen', own ?? '')
    await sprayer.post('/api/climate-readings', { boothId: own, airC: '20', rhPct: '50' })
    await sprayer.post('/api/climate-readings', { boothId: other, airC: '21', rhPct: '50' })
    expect((await screen.get(`/api/climate-readings?boothId=${other}`)).status).toBe(403)
    const { body } = await screen.get<{ items: { boothId: string }[] }>('/api/climate-readings')
    expect(body.items.length).toBeGreaterThan(0)
    expect(body.items.every(({ boothId }) => boothId === own)).toBe(true)
  })

  it.each(['/api/climate-readings', '/api/timers'])('%s refuses a cursor with an instant that there is not', async (path) => {
    for (const values of [[Number.MAX_SAFE_INTEGER, randomUUID()], [-1, randomUUID()], [0, 'no id']]) {
      const cursor = Buffer.from(JSON.stringify(values)).toString('base64url')
      expect(await sprayer.get(`${path}?cursor=${cursor}`)).toMatchObject({ status: 400, body: { fields: [{ path: 'cursor' }] } })
    }
  })

  it('refuses an unknown booth and air that is none', async () => {
    expect(await sprayer.post('/api/climate-readings', { boothId: randomUUID(), airC: '20', rhPct: '50' })).toMatchObject({ status: 400, body: { fields: [{ path: 'boothId' }] } })
    expect(await sprayer.post('/api/climate-readings', { boothId: booths[0]?.id, airC: '400', rhPct: '50' })).toMatchObject({ status: 400, body: { fields: [{ path: 'airC' }] } })
    expect((await sprayer.post('/api/climate-readings', { boothId: booths[0]?.id, airC: '20,5', rhPct: '50' })).status).toBe(400)
  })
})
