import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Context } from '../../server/utils/context'
import { approve, signIn } from '../../server/services/sessions'
import { hashSecret } from '../../server/utils/password'
import { makeShop } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

const password = 'a long word of the tests'
let work: Workshop
let oldHash: string
let newHash: string
beforeAll(async () => {
  work = await openWorkshop()
  oldHash = await hashSecret(password)
  newHash = await hashSecret(`${password} that is another one`)
}, 120_000)
beforeEach(async () => {
  Object.assign(work.shop, await makeShop(work.admin))
  await work.admin('users').whereIn('id', Object.values(work.shop.users)).update({ password_hash: oldHash })
})
afterAll(() => work.close())

const emailOf = (role: string) => `${role}-${work.shop.mark}@potbell.example`

/** A context whose transaction finds the person changed: after the password was checked, before anything is written. */
function changing(ctx: Context, id: string, columns: object): Context {
  return { ...ctx, clock: { now: async () => {
    await work.admin('users').where({ id }).update(columns)
    return work.clock.now
  } } }
}
const nobody = (): Context => ({ ...work.as('sprayer'), principal: { kind: 'nobody', user: null, device: null } })
const refused = { status: 401, code: 'wrong-sign-in' }

describe('a right password', () => {
  it.each([['is changed', () => ({ password_hash: newHash })], ['is of somebody who is put out of use', () => ({ active: false })]])('opens no session where it %s meanwhile', async (_what, columns) => {
    const id = work.shop.users.sprayer
    await expect(signIn(changing(nobody(), id, columns()), { email: emailOf('sprayer'), password }, randomUUID())).rejects.toMatchObject(refused)
    expect(await work.admin('sessions').where({ user_id: id })).toEqual([])
  })

  it('gives no word where it is changed meanwhile, nor where the person may approve no more', async () => {
    const body = { email: emailOf('foreman'), password, action: 'clean-booth', subject: `booth:${work.shop.boothId}`, reason: 'Cleaned' } as const
    const id = work.shop.users.foreman
    await expect(approve(changing(work.as('sprayer'), id, { role: 'sprayer' }), body)).rejects.toMatchObject({ status: 403 })
    await work.admin('users').where({ id }).update({ role: 'foreman' })
    await expect(approve(changing(work.as('sprayer'), id, { password_hash: newHash }), body)).rejects.toMatchObject(refused)
    expect(await work.admin('approvals').where({ approved_by_user_id: id })).toEqual([])
  })

  it('opens one where nothing changed', async () => {
    expect((await signIn(nobody(), { email: emailOf('sprayer'), password }, randomUUID())).user?.id).toBe(work.shop.users.sprayer)
  })
})
