import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { User } from '#shared/schemas/shop'
import { createKnex } from '../../server/database/connection'
import { baseUrl, Client, signedIn } from './support/http'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '')
let manager: Client
beforeAll(async () => {
  manager = await signedIn('manager')
})
afterAll(() => admin.destroy())

const first = 'first-word-to-pass-on'
const own = 'own words, nobody else\'s'

const person = (more: object = {}) => ({
  name: 'Ylva Tornmark', initials: 'YT', email: `ylva-${randomUUID()}@potbell.example`, role: 'sprayer', isocyanateTrainingUntil: null, password: first, ...more,
})
const entered = async (more: object = {}) => (await manager.post<User>('/api/users', person(more))).body
const signIn = (client: Client, email: string, password: string) => client.post('/api/session', { email, password })

/** Somebody new who has chosen a password of their own, and the browser that they are signed in at. */
async function settled(more: object = {}): Promise<{ user: User, client: Client }> {
  const { id, email } = await entered(more)
  const client = new Client()
  await signIn(client, email, first)
  expect((await client.post('/api/session/password', { currentPassword: first, newPassword: own })).status).toBe(200)
  return { user: (await manager.get<User>(`/api/users/${id}`)).body, client }
}

const fieldsOf = (body: unknown) => (body as { fields: { path: string }[] }).fields.map(({ path }) => path)

describe('entering a person', () => {
  it('answers without any password and keeps only its hash', async () => {
    const { status, body } = await manager.post<User>('/api/users', person({ isocyanateTrainingUntil: '2031-05-31' }))
    expect(status).toBe(201)
    expect(body).toMatchObject({ role: 'sprayer', active: true, canSignIn: true, mustChangePassword: true, isocyanateTraining: 'valid' })
    expect(JSON.stringify(body)).not.toContain(first)
    const row = await admin('users').where({ id: body.id }).first<{ password_hash: string }>('password_hash')
    expect(row.password_hash).toMatch(/^\$scrypt\$/)
    const entries = await admin('audit_entries').where({ subject: `user:${body.id}` }).select('*')
    expect(entries).toHaveLength(1)
    expect(JSON.stringify(entries)).not.toMatch(/Ylva|ylva|first-word/)
  })

  it('refuses an address that is taken, in whatever letters, beside the field', async () => {
    const { email } = await entered()
    const { status, body } = await manager.post('/api/users', person({ email: email.toUpperCase() }))
    expect([status, body.code, fieldsOf(body)]).toEqual([409, 'duplicate', ['email']])
  })

  it.each([
    ['password', 'too short'], ['password', 'Password123'], ['password', 'let the pot ring'], ['password', 'aaaaaaaaaaaa'],
    ['email', 'nobody'], ['role', 'owner'], ['name', ''], ['initials', 'ABCDE'], ['isocyanateTrainingUntil', 'soon'],
  ])('refuses %s "%s" beside the field and does not echo it', async (field, value) => {
    const { status, body } = await manager.post('/api/users', person({ [field]: value }))
    expect(status).toBe(400)
    expect(new Set(fieldsOf(body))).toEqual(new Set([field]))
    if (value.length > 8) expect(JSON.stringify(body)).not.toContain(value)
  })

  it('is refused to a foreman', async () => {
    const foreman = await signedIn('foreman')
    expect((await foreman.post('/api/users', person())).status).toBe(403)
    expect((await foreman.get('/api/users')).status).toBe(200)
  })
})

describe('a first password', () => {
  it('opens nothing but the change of it', async () => {
    const { email } = await entered()
    const client = new Client()
    expect((await signIn(client, email, first)).body).toMatchObject({ user: { mustChangePassword: true } })
    expect((await client.get('/api/batches')).body).toMatchObject({ code: 'password-change-due' })
    expect((await client.get('/api/batches')).status).toBe(403)
    expect((await client.get('/api/session')).status).toBe(200)
    expect((await client.post('/api/session/password', { currentPassword: first, newPassword: own })).body).toMatchObject({ user: { email, mustChangePassword: false } })
    expect((await client.get('/api/batches')).status).toBe(200)
    expect((await signIn(new Client(), email, first)).status).toBe(401)
    expect((await signIn(new Client(), email, own)).status).toBe(201)
  })

  it('is not yet somebody\'s word for an approval', async () => {
    const { email } = await entered({ role: 'foreman' })
    const sprayer = await signedIn('sprayer')
    const asked = { email, password: first, action: 'use-expired-lot', subject: `lot:${randomUUID()}`, reason: 'Sheet allows it' }
    expect((await sprayer.post('/api/approvals', asked)).status).toBe(403)
  })
})

describe('changing one\'s own password', () => {
  it('ends every session that was open, also a replayed one of the same browser', async () => {
    const { user, client } = await settled()
    const elsewhere = new Client()
    await signIn(elsewhere, user.email, own)
    const replayed = client.copy()
    expect((await client.post('/api/session/password', { currentPassword: own, newPassword: `${own} again` })).status).toBe(200)
    expect([(await replayed.get('/api/batches')).status, (await elsewhere.get('/api/batches')).status, (await client.get('/api/batches')).status]).toEqual([401, 401, 200])
  })

  it.each([
    ['a wrong present password', { currentPassword: 'something else', newPassword: 'quite new words' }, 422, 'currentPassword'],
    ['the same one again', { currentPassword: own, newPassword: own }, 400, 'newPassword'],
    ['one that is guessed first', { currentPassword: own, newPassword: 'qwertyuiop' }, 400, 'newPassword'],
  ])('refuses %s beside the field and ends nothing', async (_what, body, status, field) => {
    const { client } = await settled()
    const answer = await client.post('/api/session/password', body)
    expect([answer.status, fieldsOf(answer.body)]).toEqual([status, [field]])
    expect((await client.get('/api/batches')).status).toBe(200)
  })
})

describe('a replayed cookie', () => {
  it.each([
    ['a new role', { role: 'foreman' }], ['being taken off', { active: false }],
  ])('is nobody after %s', async (_what, change) => {
    const { user, client } = await settled()
    expect((await client.get('/api/batches')).status).toBe(200)
    expect((await manager.patch(`/api/users/${user.id}`, { version: user.version, ...change })).status).toBe(200)
    expect((await client.get('/api/batches')).status).toBe(401)
  })

  it('is nobody after a new first password, which has to be changed', async () => {
    const { user, client } = await settled()
    expect((await manager.post(`/api/users/${user.id}/password`, { password: 'another first word' })).status).toBe(200)
    expect((await client.get('/api/batches')).status).toBe(401)
    expect((await signIn(client, user.email, 'another first word')).body).toMatchObject({ user: { mustChangePassword: true } })
  })

  it('stays somebody after a new name', async () => {
    const { user, client } = await settled()
    await manager.patch(`/api/users/${user.id}`, { version: user.version, name: 'Ylva Tornmark Ek' })
    expect((await client.get('/api/session')).body).toMatchObject({ user: { name: 'Ylva Tornmark Ek' } })
  })

  it('does not come back to life when the person may sign in again', async () => {
    const { user, client } = await settled()
    const { body } = await manager.patch<User>(`/api/users/${user.id}`, { version: user.version, active: false })
    expect((await signIn(new Client(), user.email, own)).status).toBe(401)
    await manager.patch(`/api/users/${user.id}`, { version: body.version, active: true })
    expect((await client.get('/api/batches')).status).toBe(401)
    expect((await signIn(client, user.email, own)).status).toBe(201)
  })
})

it('a stream that is open closes when its person is taken off', async () => {
  const { user, client } = await settled()
  const stream = await fetch(`${baseUrl}/api/events`, { headers: { cookie: client.cookieHeader() }, signal: AbortSignal.timeout(8_000) })
  expect(stream.status).toBe(200)
  const over = stream.text()
  await manager.patch(`/api/users/${user.id}`, { version: user.version, active: false })
  await expect(over).resolves.toContain('retry:')
}, 15_000)

describe('changing a person', () => {
  it('answers what stands now to a change of an older version', async () => {
    const user = await entered()
    const { body: now } = await manager.patch<User>(`/api/users/${user.id}`, { version: 1, initials: 'YE' })
    const { status, body } = await manager.patch(`/api/users/${user.id}`, { version: 1, initials: 'YF' })
    expect([status, body]).toMatchObject([409, { code: 'version-conflict', current: now }])
  })

  it('refuses an address that is taken', async () => {
    const [one, other] = [await entered(), await entered()]
    const { status, body } = await manager.patch(`/api/users/${one.id}`, { version: 1, email: other.email })
    expect([status, fieldsOf(body)]).toEqual([409, ['email']])
  })

  it('leaves one\'s own password to one\'s own page', async () => {
    const { body: me } = await manager.get<{ user: { id: string } }>('/api/session')
    const { status, body } = await manager.post(`/api/users/${me.user.id}/password`, { password: 'another first word' })
    expect([status, body.code]).toEqual([422, 'own-password'])
  })

  it('keeps the last manager who can sign in', async () => {
    const { body: me } = await manager.get<{ user: { id: string } }>('/api/session')
    const { body: user } = await manager.get<User>(`/api/users/${me.user.id}`)
    for (const [field, change] of [['role', { role: 'foreman' }], ['active', { active: false }]] as const) {
      const { status, body } = await manager.patch(`/api/users/${user.id}`, { version: user.version, ...change })
      expect([status, body.code, fieldsOf(body)]).toEqual([422, 'last-manager', [field]])
    }
    expect((await manager.get('/api/users')).status).toBe(200)
  })
})
