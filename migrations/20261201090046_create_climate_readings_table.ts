import type { Knex } from 'knex'
import { celsius, createTable, instant, optionalUuid, percent, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'climate_readings', (t) => {
    primaryId(t)
    uuid(t, 'booth_id')
    celsius(t, 'air_c').notNullable()
    percent(t, 'rh_pct').notNullable()
    celsius(t, 'surface_c').nullable()
    celsius(t, 'dew_point_c').notNullable()
    t.enum('source', ['typed', 'sensor']).notNullable()
    optionalUuid(t, 'user_id')
    instant(t, 'at')
    instant(t, 'created_at')
    t.index(['booth_id', 'at'], 'ix_climate_readings_booth')
    reference(t, 'climate_readings', 'booth_id', 'booths')
    reference(t, 'climate_readings', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('climate_readings')
}
