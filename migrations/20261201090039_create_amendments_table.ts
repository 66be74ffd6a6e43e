import type { Knex } from 'knex'
import { createTable, instant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'amendments', (t) => {
    primaryId(t)
    uuid(t, 'batch_id')
    t.string('field', 64).notNullable()
    t.string('from_value', 500).nullable()
    t.string('to_value', 500).nullable()
    t.string('reason', 400).notNullable()
    uuid(t, 'user_id')
    optionalUuid(t, 'approval_id')
    instant(t, 'at')
    t.index(['batch_id', 'at'], 'ix_amendments_batch')
    reference(t, 'amendments', 'batch_id', 'batches')
    reference(t, 'amendments', 'user_id', 'users')
    reference(t, 'amendments', 'approval_id', 'approvals')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('amendments')
}
