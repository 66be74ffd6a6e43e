import type { Knex } from 'knex'
import { createTable, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_pieces', (t) => {
    uuid(t, 'batch_id')
    uuid(t, 'piece_id')
    t.primary(['batch_id', 'piece_id'])
    t.index(['piece_id', 'batch_id'], 'ix_batch_pieces_piece')
    reference(t, 'batch_pieces', 'batch_id', 'batches')
    reference(t, 'batch_pieces', 'piece_id', 'pieces')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_pieces')
}
