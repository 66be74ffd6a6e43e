import type { Knex } from 'knex'
import { createTable, grams, mutable, optionalUuid, percent, primaryId, reference } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'guns', (t) => {
    primaryId(t)
    t.string('name', 60).notNullable()
    t.enum('kind', ['cup-gun', 'pressure-pot', 'pump']).notNullable()
    t.decimal('nozzle_mm', 5, 2).nullable()
    optionalUuid(t, 'booth_id')
    percent(t, 'efficiency_flat_pct').notNullable()
    percent(t, 'efficiency_frames_pct').notNullable()
    percent(t, 'efficiency_sticks_pct').notNullable()
    t.boolean('efficiency_measured').notNullable().defaultTo(false)
    grams(t, 'residue_g').notNullable()
    grams(t, 'smallest_fill_g').notNullable().defaultTo('0')
    t.decimal('flow_g_per_min', 10, 3).nullable()
    t.decimal('pace_m2_per_h', 10, 4).nullable()
    t.boolean('active').notNullable().defaultTo(true)
    mutable(t)
    t.unique(['name'], { indexName: 'uq_guns_name' })
    reference(t, 'guns', 'booth_id', 'booths')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('guns')
}
