import type { Knex } from 'knex'

type Table = Knex.CreateTableBuilder

/** Creates an InnoDB table in the one character set and collation of the project, whatever the server's default is. */
export function createTable(knex: Knex, name: string, build: (t: Table) => void): Promise<void> {
  return knex.schema.createTable(name, (t) => {
    t.engine('InnoDB')
    t.charset('utf8mb4')
    t.collate('utf8mb4_unicode_520_ci')
    build(t)
  })
}

const uuidType = 'char(36) character set ascii collate ascii_bin'
const hashType = 'char(64) character set ascii collate ascii_bin'

/** A UUID column that must be there. */
export const uuid = (t: Table, column: string) => t.specificType(column, uuidType).notNullable()

/** A UUID column that may be empty. */
export const optionalUuid = (t: Table, column: string) => t.specificType(column, uuidType).nullable()

/** The primary key of nearly every table. */
export const primaryId = (t: Table) => uuid(t, 'id').primary()

/** A SHA-256 in lower-case hexadecimal. */
export const hash = (t: Table, column: string) => t.specificType(column, hashType).notNullable()

/** An instant in UTC with milliseconds, required. */
export const instant = (t: Table, column: string) => t.datetime(column, { precision: 3 }).notNullable()

/** An instant in UTC with milliseconds that may not have come yet. */
export const optionalInstant = (t: Table, column: string) => t.datetime(column, { precision: 3 }).nullable()

/** Grams to a tenth of a milligram, far finer than any bench scale. */
export const grams = (t: Table, column: string) => t.decimal(column, 14, 4)

/** A percentage with four decimals. */
export const percent = (t: Table, column: string) => t.decimal(column, 9, 4)

/** Number of whole minutes and fractions of one. */
export const minutes = (t: Table, column: string) => t.decimal(column, 12, 3)

/** Degrees Celsius to a hundredth. */
export const celsius = (t: Table, column: string) => t.decimal(column, 6, 2)

/** The optimistic lock and the two instants of a row that changes. */
export function mutable(t: Table): void {
  t.integer('version').unsigned().notNullable().defaultTo(1)
  instant(t, 'created_at')
  instant(t, 'updated_at')
}

/** A named foreign key without cascade: records are never deleted behind one's back. */
export function reference(t: Table, table: string, column: string, target: string): void {
  t.foreign(column, `fk_${table}_${column}`).references('id').inTable(target)
}
