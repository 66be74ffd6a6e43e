import type { Knex } from 'knex'
import { createTable, instant, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'number_blocks', (t) => {
    primaryId(t)
    t.string('series', 32).notNullable()
    uuid(t, 'device_id')
    t.integer('first_number').unsigned().notNullable()
    t.integer('last_number').unsigned().notNullable()
    t.integer('next_number').unsigned().notNullable()
    instant(t, 'created_at')
    t.unique(['series', 'first_number'], { indexName: 'uq_number_blocks_first' })
    t.foreign('series', 'fk_number_blocks_series').references('name').inTable('number_series')
    reference(t, 'number_blocks', 'device_id', 'devices')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('number_blocks')
}
