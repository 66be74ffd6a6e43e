import type { Knex } from 'knex'
import { createTable, instant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_events', (t) => {
    primaryId(t)
    uuid(t, 'batch_id')
    t.enum('kind', ['first-spray', 'last-spray', 'emptied', 'review-settled', 'note']).notNullable()
    instant(t, 'at')
    optionalUuid(t, 'user_id')
    optionalUuid(t, 'device_id')
    optionalUuid(t, 'gun_id')
    optionalUuid(t, 'booth_id')
    t.text('details', 'longtext').notNullable()
    instant(t, 'created_at')
    t.index(['batch_id', 'at'], 'ix_batch_events_batch')
    reference(t, 'batch_events', 'user_id', 'users')
    reference(t, 'batch_events', 'device_id', 'devices')
    reference(t, 'batch_events', 'gun_id', 'guns')
    reference(t, 'batch_events', 'booth_id', 'booths')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_events')
}
