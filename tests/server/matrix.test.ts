import { randomUUID } from 'node:crypto'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Asker } from '#shared/types/roles'
import { may } from '#shared/utils/permissions'
import { apiRoutes } from '../../server/utils/openapi-routes'
import { Client, enrolled, signedIn } from './support/http'

/** Every route asked by everybody: what the permission table forbids is refused before anything is looked at. */
const askers: Asker[] = ['nobody', 'sprayer', 'foreman', 'manager', 'bench', 'screen']
const clients = new Map<Asker, Client>()

/** Routes whose answer never ends, and the one that would end the asker's own session. */
const leftOut = new Set(['get /api/events', 'delete /api/session'])

beforeAll(async () => {
  const manager = await signedIn('manager')
  const { body } = await manager.get<{ items: { id: string }[] }>('/api/booths')
  const boothId = body.items[0]!.id
  clients.set('nobody', new Client())
  clients.set('sprayer', await signedIn('sprayer'))
  clients.set('foreman', await signedIn('foreman'))
  clients.set('manager', manager)
  clients.set('bench', await enrolled('bench', boothId))
  clients.set('screen', await enrolled('screen', boothId))
})

describe('the permission matrix', () => {
  const routes = apiRoutes.filter(({ method, path }) => !leftOut.has(`${method.toLowerCase()} ${path}`))

  it('knows every route of the API', () => {
    expect(routes.length).toBeGreaterThan(30)
  })

  describe.each(routes.map((route) => [route.method.toUpperCase(), route.path, route] as const))('%s %s', (method, path, route) => {
    it.each(askers)('asked by %s', async (asker) => {
      const url = path.replace('{name}', 'dew-point').replace(/\{[^}]+\}/g, randomUUID())
      const { status, body } = await clients.get(asker)!.send(method, url, method === 'GET' ? undefined : {})
      const allowed = route.permission === 'public' || may(asker, route.permission)
      if (allowed) {
        // Nonsense is sent on purpose: the answer may refuse it, but not for who asks. A device's own limits are 404.
        expect([200, 201, 204, 400, 401, 404, 409, 422].includes(status), `${status} ${JSON.stringify(body)}`).toBe(true)
        if (route.permission !== 'public') expect(status).not.toBe(401)
      } else {
        expect(status).toBe(asker === 'nobody' ? 401 : 403)
        expect(body).toMatchObject({ code: asker === 'nobody' ? 'signed-out' : 'forbidden' })
      }
    })
  })
})
