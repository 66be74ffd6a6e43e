import type { Knex } from 'knex'
import { createTable, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'application_pieces', (t) => {
    uuid(t, 'application_id')
    uuid(t, 'piece_id')
    t.primary(['application_id', 'piece_id'])
    t.index(['piece_id', 'application_id'], 'ix_application_pieces_piece')
    reference(t, 'application_pieces', 'application_id', 'applications')
    reference(t, 'application_pieces', 'piece_id', 'pieces')
  })
  await createTable(knex, 'application_batches', (t) => {
    uuid(t, 'application_id')
    uuid(t, 'batch_id')
    t.primary(['application_id', 'batch_id'])
    t.index(['batch_id', 'application_id'], 'ix_application_batches_batch')
    reference(t, 'application_batches', 'application_id', 'applications')
    reference(t, 'application_batches', 'batch_id', 'batches')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('application_batches')
  await knex.schema.dropTable('application_pieces')
}
