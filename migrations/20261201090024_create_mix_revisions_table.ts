import type { Knex } from 'knex'
import { celsius, createTable, instant, minutes, optionalUuid, percent, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'mix_revisions', (t) => {
    primaryId(t)
    uuid(t, 'mix_id')
    t.integer('number').unsigned().notNullable()
    t.enum('basis', ['weight', 'volume']).notNullable()
    minutes(t, 'pot_life_min').nullable()
    celsius(t, 'pot_life_reference_c').nullable()
    t.text('pot_life_table', 'longtext').nullable()
    celsius(t, 'halves_per_c').nullable()
    percent(t, 'late_from_pct').notNullable().defaultTo('75')
    minutes(t, 'induction_min').notNullable().defaultTo('0')
    t.string('viscosity_cup', 12).nullable()
    t.decimal('viscosity_seconds_min', 7, 2).nullable()
    t.decimal('viscosity_seconds_max', 7, 2).nullable()
    celsius(t, 'viscosity_at_c').nullable()
    t.decimal('density_g_per_ml', 9, 5).nullable()
    percent(t, 'volume_solids_pct').nullable()
    percent(t, 'leftover_share_pct').nullable()
    t.string('pot_life_source', 200).nullable()
    t.string('notes', 1000).nullable()
    optionalUuid(t, 'created_by_user_id')
    instant(t, 'created_at')
    t.unique(['mix_id', 'number'], { indexName: 'uq_mix_revisions_number' })
    reference(t, 'mix_revisions', 'mix_id', 'mixes')
    reference(t, 'mix_revisions', 'created_by_user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('mix_revisions')
}
