import { randomUUID } from 'node:crypto'
import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../server/database/connection'
import { canonicalJson } from '../../server/utils/canonical'
import { sha256 } from '../../server/utils/hash'
import { Client, signedIn } from './support/http'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '')
afterAll(() => admin.destroy())

describe('signing in', () => {
  it('answers who signed in and for which shop', async () => {
    const client = await signedIn('foreman')
    const { status, body } = await client.get('/api/session')
    expect(status).toBe(200)
    expect(body).toMatchObject({ user: { email: 'foreman@potbell.example', role: 'foreman' }, device: null, shop: { demo: true } })
  })

  it('says the same words for an unknown address and a wrong password', async () => {
    const unknown = await new Client().post('/api/session', { email: `nobody-${randomUUID()}@potbell.example`, password: 'x' })
    const wrong = await new Client().post('/api/session', { email: 'foreman@potbell.example', password: 'not this' })
    await signedIn('foreman')
    expect(unknown.status).toBe(401)
    expect(wrong).toMatchObject({ status: 401, body: unknown.body })
  })

  it('names the field that is wrong and never echoes what was typed', async () => {
    const { status, body } = await new Client().post('/api/session', { email: 'not-an-address', password: 'secret words' })
    expect(status).toBe(400)
    expect(body).toMatchObject({ code: 'invalid', fields: [{ path: 'email', message: 'That is not an e-mail address.' }] })
    expect(JSON.stringify(body)).not.toMatch(/not-an-address|secret words/)
  })

  it('lets ten tries at an account through in fifteen minutes, also when they are sent at once from several browsers', async () => {
    const email = `guessed-${randomUUID()}@potbell.example`
    const answers = await Promise.all(Array.from({ length: 25 }, () => new Client().post('/api/session', { email, password: 'guess' })))
    expect(answers.filter(({ status }) => status === 401)).toHaveLength(10)
    const refused = answers.filter(({ status }) => status === 429)
    expect(refused).toHaveLength(15)
    expect(Number(refused[0]?.headers.get('retry-after'))).toBeGreaterThan(0)
  })

  it('keeps only a hash of the cookie in the database and nothing but a random id in the cookie', async () => {
    const client = await signedIn('sprayer')
    expect(client.cookieHeader()).toMatch(/^potbell_session=/)
    expect(client.cookieHeader().length).toBeLessThan(1000)
    const ids = await admin('sessions').pluck<string[]>('id')
    expect(ids.every((id) => /^[0-9a-f]{64}$/.test(id))).toBe(true)
  })

  it('sets the cookie out of reach of scripts and other sites', async () => {
    const { headers } = await new Client().post('/api/session', { email: 'sprayer@potbell.example', password: 'let the pot ring' })
    const cookie = headers.getSetCookie().find((line) => line.startsWith('potbell_session='))
    expect(cookie).toMatch(/HttpOnly/i)
    expect(cookie).toMatch(/SameSite=Lax/i)
    expect(cookie).not.toMatch(/Secure/i)
  })
})

describe('signing in where somebody is signed in', () => {
  it('ends the session that the browser had before, whoever\'s it was', async () => {
    const client = await signedIn('sprayer')
    const before = client.copy()
    expect((await client.post('/api/session', { email: 'foreman@potbell.example', password: 'let the pot ring' })).status).toBe(201)
    expect((await before.get('/api/batches')).status).toBe(401)
    expect((await client.get('/api/session')).body).toMatchObject({ user: { role: 'foreman' } })
  })
})

describe('signing out', () => {
  it('ends the session at once: the same cookie is nobody afterwards', async () => {
    const client = await signedIn('sprayer')
    const replay = client.copy()
    expect((await replay.get('/api/batches')).status).toBe(200)
    expect((await client.delete('/api/session')).status).toBe(204)
    expect((await replay.get('/api/batches')).status).toBe(401)
  })

  it('is harmless when nobody is signed in', async () => {
    expect((await new Client().delete('/api/session')).status).toBe(204)
  })

  it('is not the only end: a disabled account is out at the next request', async () => {
    const id = randomUUID()
    const [pattern] = await admin('users').where({ email: 'sprayer@potbell.example' }).select<{ password_hash: string }[]>('password_hash')
    const at = new Date()
    await admin('users').insert({
      id, email: `${id}@potbell.example`, name: 'Leaves Today', initials: 'LT', role: 'sprayer', password_hash: pattern?.password_hash,
      demo_password: false, created_at: at, updated_at: at,
    })
    const client = new Client()
    await client.post('/api/session', { email: `${id}@potbell.example`, password: 'let the pot ring' })
    expect((await client.get('/api/batches')).status).toBe(200)
    await admin('users').where({ id }).update({ active: false })
    expect((await client.get('/api/batches')).status).toBe(401)
  })

  it('leaves no back door: the cookie library\'s own route is not there', async () => {
    const client = await signedIn('sprayer')
    for (const method of ['GET', 'DELETE']) {
      expect((await client.send(method, '/api/_auth/session', undefined)).status).toBe(404)
    }
  })
})

describe('approving at someone else\'s screen', () => {
  const approval = (role: string, password = 'let the pot ring') => ({
    email: `${role}@potbell.example`, password, action: 'use-expired-lot', subject: `lot:${randomUUID()}`, reason: 'Sheet allows three months more',
  })

  it('gives a foreman\'s word for five minutes and leaves the session as it is', async () => {
    const sprayer = await signedIn('sprayer')
    const { status, body } = await sprayer.post<{ id: string; expiresAt: string }>('/api/approvals', approval('foreman'))
    expect(status).toBe(201)
    const row = await admin('approvals').where({ id: body.id }).first<{ expires_at: Date; created_at: Date; used_at: Date | null }>()
    expect(row && row.expires_at.getTime() - row.created_at.getTime()).toBe(300_000)
    expect(row?.used_at).toBeNull()
    expect((await sprayer.get('/api/session')).body).toMatchObject({ user: { role: 'sprayer' } })
  })

  it('keeps nothing by which the password could be guessed', async () => {
    const sprayer = await signedIn('sprayer')
    const sent = approval('foreman')
    const key = randomUUID()
    await sprayer.post('/api/approvals', sent, { headers: { 'idempotency-key': key } })
    const row = await admin('idempotency_keys').where({ idempotency_key: key }).first<{ body_hash: string; answer: string }>()
    expect(row?.body_hash).toMatch(/^[0-9a-f]{64}$/)
    expect(row?.body_hash).not.toBe(sha256(canonicalJson(sent)))
    expect(row?.answer).not.toContain(sent.password)
  })

  it('is refused to a sprayer and to a wrong password', async () => {
    const sprayer = await signedIn('sprayer')
    expect((await sprayer.post('/api/approvals', approval('sprayer'))).status).toBe(403)
    expect((await sprayer.post('/api/approvals', approval('foreman', 'wrong'))).status).toBe(401)
    await signedIn('foreman')
  })
})
