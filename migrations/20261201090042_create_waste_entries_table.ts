import type { Knex } from 'knex'
import { createTable, grams, instant, optionalUuid, primaryId, reference } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'waste_entries', (t) => {
    primaryId(t)
    optionalUuid(t, 'batch_id')
    optionalUuid(t, 'lot_id')
    t.enum('kind', ['leftover', 'stopped-mix', 'cleaning', 'expired']).notNullable()
    t.string('chemistry', 40).nullable()
    grams(t, 'grams').nullable()
    t.boolean('weighed').notNullable()
    t.string('disposal', 60).notNullable()
    t.string('reason', 400).nullable()
    optionalUuid(t, 'user_id')
    instant(t, 'at')
    t.index(['at'], 'ix_waste_entries_at')
    reference(t, 'waste_entries', 'batch_id', 'batches')
    reference(t, 'waste_entries', 'lot_id', 'lots')
    reference(t, 'waste_entries', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('waste_entries')
}
