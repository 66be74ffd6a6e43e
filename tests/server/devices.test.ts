import { randomUUID } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { type Client, enrolled, signedIn } from './support/http'

interface Named { id: string; name: string }
const firstBooth = async (client: Client) => (await client.get<{ items: Named[] }>('/api/booths')).body.items[0]!

describe('enrolling a browser', () => {
  it('makes it the screen of a booth, which it stays after the manager has signed out', async () => {
    const manager = await signedIn('manager')
    const booth = await firstBooth(manager)
    const name = `Screen ${randomUUID().slice(0, 8)}`
    const { status } = await manager.post('/api/devices', { kind: 'screen', name, boothId: booth.id, scaleId: null })
    expect(status).toBe(201)
    await manager.delete('/api/session')
    expect((await manager.get('/api/session')).body).toMatchObject({ user: null, device: { kind: 'screen', name, boothId: booth.id } })
  })

  it('needs a booth for a screen and says so beside the field', async () => {
    const manager = await signedIn('manager')
    const { status, body } = await manager.post('/api/devices', { kind: 'screen', name: 'Nowhere', boothId: null, scaleId: null })
    expect(status).toBe(400)
    expect(body).toMatchObject({ fields: [{ path: 'boothId', message: 'A screen belongs to a booth.' }] })
  })

  it('refuses a booth that is not there', async () => {
    const manager = await signedIn('manager')
    const { status, body } = await manager.post('/api/devices', { kind: 'screen', name: 'Nowhere', boothId: randomUUID(), scaleId: null })
    expect(status).toBe(400)
    expect(body).toMatchObject({ fields: [{ path: 'boothId' }] })
  })

  it('gives the same device and cookie when it is sent twice', async () => {
    const manager = await signedIn('manager')
    const booth = await firstBooth(manager)
    const key = randomUUID()
    const body = { kind: 'screen', name: 'Sent twice', boothId: booth.id, scaleId: null }
    const first = await manager.post('/api/devices', body, { key })
    const cookie = manager.cookieHeader()
    const second = await manager.post('/api/devices', body, { key })
    expect(second.body).toEqual(first.body)
    expect(manager.cookieHeader()).toBe(cookie)
    expect((await manager.get('/api/session')).body).toMatchObject({ device: { name: 'Sent twice' } })
  })

  it('takes the place of what the browser was before', async () => {
    const manager = await signedIn('manager')
    const booth = await firstBooth(manager)
    const ask = (name: string) => manager.post<Named>('/api/devices', { kind: 'screen', name, boothId: booth.id, scaleId: null })
    const before = await ask(`Before ${randomUUID().slice(0, 8)}`)
    const after = await ask(`After ${randomUUID().slice(0, 8)}`)
    const { body } = await manager.get<{ items: Named[] }>('/api/devices')
    const ids = body.items.map(({ id }) => id)
    expect(ids).toContain(after.body.id)
    expect(ids).not.toContain(before.body.id)
  })

  it('is for managers only', async () => {
    const foreman = await signedIn('foreman')
    const booth = await firstBooth(foreman)
    expect((await foreman.post('/api/devices', { kind: 'screen', name: 'Mine', boothId: booth.id, scaleId: null })).status).toBe(403)
  })

  it('ends at once when the manager takes it away', async () => {
    const manager = await signedIn('manager')
    const booth = await firstBooth(manager)
    const screen = await enrolled('screen', booth.id)
    const { body } = await screen.get<{ device: Named }>('/api/session')
    expect((await screen.get('/api/live')).status).toBe(200)
    expect((await manager.delete(`/api/devices/${body.device.id}`)).status).toBe(204)
    expect((await screen.get('/api/live')).status).toBe(401)
    expect((await manager.delete(`/api/devices/${body.device.id}`)).status).toBe(404)
  })
})
