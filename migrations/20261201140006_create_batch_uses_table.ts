import type { Knex } from 'knex'
import { createTable, instant, uuid } from '../server/database/columns'

/** Which lots and materials a batch holds, by its effective pours, in the order of the log. Can be made anew from the record. */
export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_uses', (t) => {
    uuid(t, 'used_id')
    instant(t, 'mixed_at')
    uuid(t, 'batch_id')
    t.primary(['used_id', 'mixed_at', 'batch_id'])
    t.index(['batch_id'], 'ix_batch_uses_batch')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_uses')
}
