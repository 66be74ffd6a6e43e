import type { Knex } from 'knex'
import { createTable, grams, instant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'lot_movements', (t) => {
    primaryId(t)
    uuid(t, 'lot_id')
    t.enum('kind', ['received', 'poured', 'compensation', 'counted', 'wasted', 'split']).notNullable()
    grams(t, 'grams').notNullable()
    optionalUuid(t, 'batch_id')
    t.string('reason', 400).nullable()
    optionalUuid(t, 'user_id')
    instant(t, 'at')
    instant(t, 'created_at')
    t.index(['lot_id', 'grams'], 'ix_lot_movements_stock')
    t.index(['batch_id'], 'ix_lot_movements_batch')
    reference(t, 'lot_movements', 'lot_id', 'lots')
    reference(t, 'lot_movements', 'batch_id', 'batches')
    reference(t, 'lot_movements', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('lot_movements')
}
