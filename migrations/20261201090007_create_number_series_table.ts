import type { Knex } from 'knex'
import { createTable } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'number_series', (t) => {
    t.string('name', 32).notNullable().primary()
    t.string('prefix', 8).notNullable()
    t.integer('next_number').unsigned().notNullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('number_series')
}
