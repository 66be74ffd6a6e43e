import type { Knex } from 'knex'

const indexes = {
  ix_batch_current_mixed_at: ['mixed_at', 'batch_id'],
  ix_batch_current_job: ['job_id', 'mixed_at', 'batch_id'],
  ix_batch_current_mixed_by: ['mixed_by_user_id', 'mixed_at', 'batch_id'],
  ix_batch_current_booth: ['booth_id', 'mixed_at', 'batch_id'],
  ix_batch_current_deviates: ['deviates', 'mixed_at', 'batch_id'],
}

/** Each filter of the log has an index in the order of the list, so that a page is a range of one of them. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batch_current', (t) => {
    for (const [name, columns] of Object.entries(indexes)) t.index(columns, name)
  })
}

export async function down(knex: Knex): Promise<void> {
  // The booth's foreign key needs an index of its own before the wider one can go.
  await knex.raw('ALTER TABLE batch_current ADD INDEX fk_batch_current_booth_id (booth_id)')
  await knex.schema.alterTable('batch_current', (t) => {
    for (const [name, columns] of Object.entries(indexes)) t.dropIndex(columns, name)
  })
}
