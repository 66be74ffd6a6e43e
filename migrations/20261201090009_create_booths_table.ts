import type { Knex } from 'knex'
import { createTable, minutes, mutable, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'booths', (t) => {
    primaryId(t)
    t.string('name', 60).notNullable()
    minutes(t, 'clearance_min').notNullable()
    t.boolean('clearance_measured').notNullable().defaultTo(false)
    t.enum('extraction', ['running', 'off', 'unknown']).notNullable().defaultTo('unknown')
    t.boolean('active').notNullable().defaultTo(true)
    mutable(t)
    t.unique(['name'], { indexName: 'uq_booths_name' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('booths')
}
