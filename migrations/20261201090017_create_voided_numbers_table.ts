import type { Knex } from 'knex'
import { createTable, instant, optionalUuid, reference } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'voided_numbers', (t) => {
    t.string('series', 32).notNullable()
    t.integer('number').unsigned().notNullable()
    t.string('reason', 400).notNullable()
    optionalUuid(t, 'user_id')
    instant(t, 'at')
    t.primary(['series', 'number'])
    t.foreign('series', 'fk_voided_numbers_series').references('name').inTable('number_series')
    reference(t, 'voided_numbers', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('voided_numbers')
}
