import fc from 'fast-check'
import { beforeAll, describe, expect, it } from 'vitest'
import { encodeCursor } from '../../server/utils/keyset'
import { apiRoutes } from '../../server/utils/openapi-routes'
import { signedInOften, type Client } from './support/http'

let manager: Client
beforeAll(async () => {
  manager = await signedInOften('manager')
})

const names = ['q', 'state', 'role', 'chemistry', 'limit', 'cursor', 'order', 'low', 'usable', 'materialId', 'mixId', 'revisionId', 'expiresWithinDays', 'inactive', 'archived', '__proto__', 'constructor']
const text = fc.string({ unit: 'binary', maxLength: 60 }).filter(word => word.isWellFormed())
/** A cursor as this server writes them, with values that no list gave. */
const forged = fc.array(fc.oneof(text, fc.integer(), fc.uuid(), fc.constantFrom('9999-99-99', '2026-02-31', '0000-00-00', 'Ω')), { maxLength: 3 })
  .map(values => encodeCursor(values))
const value = fc.oneof(text, forged, fc.constantFrom('true', '1', '-1', '1e9', 'NaN', '\u0000', '\\', '%', '\'; --', '2026-12-01', '00000000-0000-4000-8000-000000000000'))
const query = fc.array(fc.tuple(fc.constantFrom(...names), value), { maxLength: 5 })
const lists = apiRoutes.filter(({ method, path, query: takes }) => method === 'get' && takes && !path.includes('{') && path !== '/api/events').map(({ path }) => path)
const things = ['/api/materials/', '/api/lots/', '/api/mixes/', '/api/schedules/', '/api/jobs/']

describe('junk in an address', () => {
  it.each(lists)('of %s is answered or refused, never an error of ours', async (path) => {
    await fc.assert(fc.asyncProperty(query, async (pairs) => {
      const { status } = await manager.get(`${path}?${new URLSearchParams(pairs).toString()}`)
      expect([200, 400]).toContain(status)
    }), { numRuns: 25 })
  }, 60_000)

  it.each(things)('in place of an id of %s is refused', async (path) => {
    await fc.assert(fc.asyncProperty(text.filter(word => !/^[\s./?#]*$/.test(word)), async (id) => {
      const { status } = await manager.get(`${path}${encodeURIComponent(id)}`)
      expect([400, 404]).toContain(status)
    }), { numRuns: 20 })
  }, 60_000)
})
