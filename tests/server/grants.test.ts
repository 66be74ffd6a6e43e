import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { tables, type TableKind } from '../../server/database/tables'
import { openSchema, type Schema } from './support/schema'

let schema: Schema
beforeAll(async () => {
  schema = await openSchema('services')
}, 120_000)
afterAll(() => schema.close())

const listed = Object.values(tables).flat() as string[]
/** Knex's own lock is the admin's business alone. */
const adminOnly = ['knex_migrations_lock']

/** MariaDB: command denied to user. */
const denied = { errno: 1142 }

const forbidden: Record<TableKind, ('insert' | 'update' | 'delete')[]> = {
  record: ['update', 'delete'],
  mutable: ['delete'],
  erasable: [],
  removable: [],
  reference: ['insert', 'update', 'delete'],
}

async function columnOf(table: string): Promise<string> {
  const [row] = await schema.admin('information_schema.columns').whereRaw('table_schema = DATABASE()').where({ table_name: table })
    .orderBy('ordinal_position').select<{ name: string }[]>('column_name as name')
  if (!row) throw new Error(`there is no table ${table}`)
  return row.name
}

describe('the list of tables', () => {
  it('names every table of the database, and no other', async () => {
    const there = await schema.admin('information_schema.tables').whereRaw('table_schema = DATABASE()').select<{ name: string }[]>('table_name as name')
    expect(there.map(({ name }) => name).filter((name) => !adminOnly.includes(name)).sort()).toEqual([...listed].sort())
  })

  it('names no table twice', () => {
    expect(new Set(listed).size).toBe(listed.length)
  })
})

describe('the application\'s database user', () => {
  it.each(listed)('may read %s', async (table) => {
    await expect(schema.db(table).limit(1)).resolves.toBeInstanceOf(Array)
  })

  const cases = (Object.keys(forbidden) as TableKind[]).flatMap((kind) => tables[kind].flatMap((table) => forbidden[kind].map((verb) => [verb, table] as const)))
  it.each(cases)('may not %s %s', async (verb, table) => {
    const column = await columnOf(table)
    const none = () => schema.db(table).whereRaw('1 = 0')
    const attempt = verb === 'delete' ? none().delete() : verb === 'update' ? none().update({ [column]: schema.db.ref(column) }) : schema.db(table).insert({ [column]: null })
    await expect(attempt).rejects.toMatchObject(denied)
  })

  it.each([...adminOnly])('may not even read %s', async (table) => {
    await expect(schema.db(table).limit(1)).rejects.toMatchObject(denied)
  })

  it.each([
    ['empty', 'TRUNCATE TABLE batches'], ['drop', 'DROP TABLE batches'], ['alter', 'ALTER TABLE batches ADD COLUMN x INT'], ['make', 'CREATE TABLE mine (x INT)'],
    ['index', 'CREATE INDEX ix_mine ON batches (code)'], ['put a trigger on', 'CREATE TRIGGER mine BEFORE INSERT ON batches FOR EACH ROW SET @x = 1'],
  ])('may not %s a table', async (_verb, sql) => {
    await expect(schema.db.raw(sql)).rejects.toMatchObject(denied)
  })
})
