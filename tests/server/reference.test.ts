import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { hazardStatements } from '#shared/reference/hazard-statements'
import { seedReference } from '../../seeds/reference'
import { openSchema, type Schema } from './support/schema'

let schema: Schema
beforeAll(async () => {
  schema = await openSchema('reference')
})
afterAll(() => schema.drop())

const rules = () => schema.admin('chemistry_rules').orderBy(['first_chemistry', 'second_chemistry', 'scope']).select('*')

describe('seedReference', () => {
  it('fills the tables that nobody edits, word for word', async () => {
    await seedReference(schema.admin)
    const stored = await schema.db('hazard_statements').select('code', 'kind', 'text')
    expect(stored).toHaveLength(hazardStatements.length)
    expect(stored).toEqual(expect.arrayContaining(hazardStatements.map(({ code, kind, text }) => ({ code, kind, text }))))
  })

  it('holds a rule that is not ordered both ways round', async () => {
    const stored = await rules()
    for (const { first, second, scope, ordered } of chemistryRules) {
      const found = (one: string, other: string) => stored.some(row => row.first_chemistry === one && row.second_chemistry === other && row.scope === scope)
      expect(found(first, second)).toBe(true)
      if (!ordered) expect(found(second, first)).toBe(true)
    }
  })

  it('puts right what differs when it runs again, and keeps identities', async () => {
    const before = await rules()
    await schema.admin('hazard_statements').where({ code: 'H226' }).update({ text: 'something else' })
    await schema.admin('chemistry_rules').where({ id: before[0]?.id }).update({ advice: 'something else' })
    await seedReference(schema.admin)
    expect(await rules()).toEqual(before)
    expect(await schema.db('hazard_statements').where({ code: 'H226' }).first('text')).toEqual({ text: 'Flammable liquid and vapour.' })
  })

  it('may not be done by the application', async () => {
    await expect(seedReference(schema.db)).rejects.toThrow(/denied/)
  })
})
