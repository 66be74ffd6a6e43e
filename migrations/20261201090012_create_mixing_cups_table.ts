import type { Knex } from 'knex'
import { createTable, mutable, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'mixing_cups', (t) => {
    primaryId(t)
    t.string('name', 60).notNullable()
    t.decimal('capacity_ml', 12, 2).notNullable()
    t.decimal('fill_line_ml', 12, 2).notNullable()
    t.boolean('active').notNullable().defaultTo(true)
    mutable(t)
    t.unique(['name'], { indexName: 'uq_mixing_cups_name' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('mixing_cups')
}
