import type { Knex } from 'knex'
import { createTable, instant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'lot_events', (t) => {
    primaryId(t)
    uuid(t, 'lot_id')
    t.enum('kind', ['blocked', 'released']).notNullable()
    t.string('reason', 400).notNullable()
    optionalUuid(t, 'user_id')
    instant(t, 'at')
    t.index(['lot_id', 'at'], 'ix_lot_events_lot')
    reference(t, 'lot_events', 'lot_id', 'lots')
    reference(t, 'lot_events', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('lot_events')
}
