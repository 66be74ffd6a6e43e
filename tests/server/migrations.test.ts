import { randomUUID } from 'node:crypto'
import { readdirSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openSchema, type Schema } from './support/schema'

let schema: Schema
beforeAll(async () => {
  schema = await openSchema(`migrations_${randomUUID().slice(0, 8)}`, { migrated: false })
})
afterAll(() => schema.drop())

interface Described {
  columns: unknown[]
  indexes: unknown[]
  keys: unknown[]
}

/** Everything that a migration can make, as the database tells it; knex's own tables aside. */
async function describeSchema(): Promise<Described> {
  const own = (query: string) => schema.admin.raw<unknown[][]>(query).then(([rows = []]) => rows)
  return {
    columns: await own('SELECT table_name, column_name, column_type, is_nullable, column_default, character_set_name, collation_name FROM information_schema.columns WHERE table_schema = DATABASE() AND table_name NOT LIKE \'knex%\' ORDER BY 1, ordinal_position'),
    indexes: await own('SELECT table_name, index_name, seq_in_index, column_name, non_unique FROM information_schema.statistics WHERE table_schema = DATABASE() AND table_name NOT LIKE \'knex%\' ORDER BY 1, 2, 3'),
    keys: await own('SELECT table_name, constraint_name, referenced_table_name, delete_rule, update_rule FROM information_schema.referential_constraints WHERE constraint_schema = DATABASE() ORDER BY 1, 2'),
  }
}

const files = readdirSync(new URL('../../migrations', import.meta.url)).sort()

describe('the migrations', () => {
  it('go up, all the way back and up again to the same schema', async () => {
    expect(await schema.migrate('latest')).toMatchObject({ applied: files })
    const first = await describeSchema()
    expect(first.columns.length).toBeGreaterThan(300)
    expect(await schema.migrate('rollback')).toEqual({ rolledBack: [...files].reverse() })
    expect(await describeSchema()).toEqual({ columns: [], indexes: [], keys: [] })
    await schema.migrate('latest')
    expect(await describeSchema()).toEqual(first)
  }, 180_000)

  it('leave every table InnoDB in the project\'s collation', async () => {
    const tables = await schema.admin('information_schema.tables').whereRaw('table_schema = DATABASE() AND table_name NOT LIKE \'knex%\'')
      .select<{ engine: string; table_collation: string }[]>('engine', 'table_collation')
    expect(new Set(tables.map(({ engine }) => engine))).toEqual(new Set(['InnoDB']))
    expect(new Set(tables.map(({ table_collation: collation }) => collation))).toEqual(new Set(['utf8mb4_unicode_520_ci']))
  })

  it('name every foreign key and cascade none', async () => {
    const { keys } = await describeSchema() as { keys: { constraint_name: string; delete_rule: string; update_rule: string }[] }
    expect(keys.length).toBeGreaterThan(60)
    for (const key of keys) {
      expect(key.constraint_name).toMatch(/^fk_/)
      expect([key.delete_rule, key.update_rule]).toEqual(['RESTRICT', 'RESTRICT'])
    }
  })

  it('are named by what they do, in the order of their times', () => {
    for (const file of files) expect(file).toMatch(/^\d{14}_(create|insert|add|drop|rename|change|fill)_[a-z0-9_]+\.ts$/)
    expect(new Set(files.map((file) => file.slice(0, 14))).size).toBe(files.length)
  })
})
