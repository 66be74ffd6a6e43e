import type { Knex } from 'knex'
import { createTable, grams, mutable, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'scales', (t) => {
    primaryId(t)
    t.string('name', 60).notNullable()
    t.decimal('division_g', 10, 4).notNullable()
    grams(t, 'capacity_g').notNullable()
    t.decimal('mpe_g', 10, 4).nullable()
    t.enum('accuracy_class', ['I', 'II', 'III', 'IIII']).nullable()
    t.decimal('verification_interval_g', 10, 4).nullable()
    t.date('next_check_on').nullable()
    t.boolean('active').notNullable().defaultTo(true)
    mutable(t)
    t.unique(['name'], { indexName: 'uq_scales_name' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('scales')
}
