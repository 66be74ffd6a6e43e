import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { changePerson } from '../../server/services/people'
import { openWorkshop, type Workshop } from './support/context'

let workshop: Workshop
beforeAll(async () => {
  workshop = await openWorkshop()
}, 120_000)
afterAll(() => workshop.close())

it('keeps one of two managers who take each other off at once', async () => {
  const at = new Date(workshop.clock.now)
  const two = [randomUUID(), randomUUID()]
  await workshop.admin('users').where({ role: 'manager' }).update({ password_hash: null })
  await workshop.admin('users').insert(two.map((id) => ({
    id, email: `${id}@potbell.example`, name: 'One of two', initials: 'OT', role: 'manager', password_hash: 'x', created_at: at, updated_at: at,
  })))
  const results = await Promise.allSettled(two.map((id) => changePerson(workshop.as('manager'), id, { version: 1, active: false })))
  expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
  expect(results.find(({ status }) => status === 'rejected')).toMatchObject({ reason: { code: 'last-manager' } })
  expect(await workshop.admin('users').where({ role: 'manager', active: true, password_hash: 'x' }).pluck('id')).toHaveLength(1)
})
