import type { Knex } from 'knex'
import { celsius, createTable, grams, mutable, optionalInstant, percent, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'materials', (t) => {
    primaryId(t)
    t.string('code', 32).notNullable()
    t.string('name', 120).notNullable()
    t.enum('role', ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide', 'ready-to-use']).notNullable()
    t.string('chemistry', 40).notNullable()
    t.boolean('contains_isocyanates').notNullable().defaultTo(false)
    t.decimal('density_g_per_ml', 9, 5).nullable()
    percent(t, 'solids_pct').nullable()
    percent(t, 'volume_solids_pct').nullable()
    percent(t, 'reacts_pct').nullable()
    t.decimal('voc_g_per_l', 10, 3).nullable()
    percent(t, 'voc_pct').nullable()
    percent(t, 'water_pct').nullable()
    percent(t, 'exempt_pct').nullable()
    celsius(t, 'flash_point_c').nullable()
    t.integer('shelf_life_days').unsigned().nullable()
    t.string('supplier', 120).nullable()
    t.string('maker_code', 60).nullable()
    t.decimal('price_per_kg', 12, 4).nullable()
    t.enum('signal_word', ['Danger', 'Warning']).nullable()
    t.text('hazard_codes', 'longtext').notNullable()
    t.string('protection_mixing', 400).nullable()
    t.string('protection_spraying', 400).nullable()
    grams(t, 'reorder_point_g').nullable()
    optionalInstant(t, 'archived_at')
    mutable(t)
    t.unique(['code'], { indexName: 'uq_materials_code' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('materials')
}
