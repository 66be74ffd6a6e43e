import { randomUUID } from 'node:crypto'
import { request } from 'node:http'
import { describe, expect, it } from 'vitest'
import { apiRoutes } from '../../server/utils/openapi-routes'
import { baseUrl, Client, signedIn } from './support/http'

const mutating = apiRoutes.filter(({ method }) => method !== 'get')
const pathOf = (path: string) => path.replace(/\{[^}]+\}/g, randomUUID())

describe('cross-site requests', () => {
  it.each(mutating.map(({ method, path }) => [method, path] as const))('%s %s is refused from another site and without an origin', async (method, path) => {
    const manager = await signedIn('manager')
    const foreign: Record<string, string | undefined>[] = [
      { origin: 'https://elsewhere.example' },
      { origin: undefined },
      { origin: 'null' },
      { 'origin': baseUrl, 'sec-fetch-site': 'cross-site' },
      { 'origin': undefined, 'sec-fetch-site': 'same-site' },
    ]
    for (const headers of foreign) {
      const { status, body } = await manager.send(method.toUpperCase(), pathOf(path), {}, { headers })
      expect(status).toBe(403)
      expect(body).toMatchObject({ code: 'cross-site' })
    }
  })

  it('a bearer token does not help a request that carries a cookie', async () => {
    const manager = await signedIn('manager')
    const { status } = await manager.post('/api/timers', {}, { headers: { origin: 'https://elsewhere.example', authorization: 'Bearer x' } })
    expect(status).toBe(403)
  })

  it('a plain-text form post is refused even from our own pages', async () => {
    const manager = await signedIn('manager')
    const { status, body } = await manager.post('/api/timers', undefined, { raw: '{"name":"x"}', headers: { 'content-type': 'text/plain' } })
    expect(status).toBe(415)
    expect(body).toMatchObject({ code: 'not-json' })
  })
})

describe('methods', () => {
  it.each(['TRACE', 'CONNECTED', 'PROPFIND'])('%s is not answered', async (method) => {
    expect(await rawStatus(method, '/api/session')).toBeGreaterThanOrEqual(400)
  })
})

describe('bodies', () => {
  it('counts a chunked body as it streams and answers 413 after draining it', async () => {
    const manager = await signedIn('manager')
    const status = await new Promise<number>((resolve, reject) => {
      const sent = request(`${baseUrl}/api/timers`, {
        method: 'POST',
        headers: {
          'origin': baseUrl, 'content-type': 'application/json', 'transfer-encoding': 'chunked', 'cookie': manager.cookieHeader(),
          'idempotency-key': randomUUID(),
        },
      }, (answer) => {
        answer.resume()
        answer.on('end', () => resolve(answer.statusCode ?? 0))
      })
      sent.on('error', reject)
      for (let part = 0; part < 40; part++) sent.write('x'.repeat(50_000))
      sent.end()
    })
    expect(status).toBe(413)
  })

  it.each([
    ['no JSON', '{"name":'],
    ['bytes that are no UTF-8', Uint8Array.of(0x22, 0xff, 0xfe, 0x22)],
  ])('%s is 400 in the API\'s own shape', async (_, raw) => {
    const manager = await signedIn('manager')
    const { status, body } = await manager.post('/api/timers', undefined, { raw })
    expect(status).toBe(400)
    expect(Object.keys(body).sort()).toEqual(['code', 'fields', 'message'])
  })

  it.each(['/api/timers', '/api/approvals', '/api/batches'])('a body nested a hundred thousand deep is 400 for %s', async (path) => {
    const manager = await signedIn('manager')
    const raw = `{"name":${'['.repeat(100_000)}${']'.repeat(100_000)}}`
    expect((await manager.post(path, undefined, { raw })).status).toBe(400)
  })

  it('a POST without an idempotency key is 400', async () => {
    const manager = await signedIn('manager')
    const { status, body } = await manager.post('/api/timers', { name: 'x', minutes: 5 }, { headers: { 'idempotency-key': undefined } })
    expect(status).toBe(400)
    expect(body).toMatchObject({ code: 'idempotency-key-missing' })
  })
})

describe('answers', () => {
  it('an unknown route of the API is 404 in the API\'s own shape', async () => {
    const { status, body } = await new Client().get('/api/no-such-thing')
    expect(status).toBe(404)
    expect(body).toEqual({ code: 'not-found', message: 'There is nothing here.', fields: [] })
  })

  it('carry an id of the server\'s own, whatever the client sends', async () => {
    const { headers } = await new Client().get('/api/session', { headers: { 'x-request-id': 'mine' } })
    expect(headers.get('x-request-id')).toMatch(/^[0-9a-f-]{36}$/)
  })

  it('of pages carry a policy with a nonce of their own and what the bench needs', async () => {
    const first = await new Client().get<string>('/sign-in')
    const second = await new Client().get<string>('/sign-in')
    const nonce = (answer: typeof first) => /script-src[^;]*'nonce-([^']+)'/.exec(answer.headers.get('content-security-policy') ?? '')?.[1]
    expect(nonce(first)).toBeTruthy()
    expect(nonce(first)).not.toBe(nonce(second))
    expect(first.body).toContain(`nonce="${nonce(first)}"`)
    const policy = first.headers.get('content-security-policy') ?? ''
    expect(policy).toContain('frame-ancestors \'none\'')
    expect(policy).not.toContain('upgrade-insecure-requests')
    expect(policy).not.toMatch(/script-src[^;]*unsafe/)
    expect(first.headers.get('strict-transport-security')).toBeNull()
    expect(first.headers.get('permissions-policy')).toMatch(/camera=\(self\).*fullscreen=\(self\).*screen-wake-lock=\(self\).*serial=\(self\)/)
    expect(first.headers.get('x-powered-by')).toBeNull()
  })
})

function rawStatus(method: string, path: string): Promise<number> {
  return new Promise((resolve) => {
    const sent = request(baseUrl + path, { method }, (answer) => {
      answer.resume()
      resolve(answer.statusCode ?? 0)
    })
    sent.on('error', () => resolve(400))
    sent.end()
  })
}
