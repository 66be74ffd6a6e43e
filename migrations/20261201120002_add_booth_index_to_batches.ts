import type { Knex } from 'knex'

/** What was sprayed in a booth is read one mix at a time, however long the log is. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batches', (t) => {
    t.index(['outcome', 'booth_id', 'mix_revision_id', 'mixed_at'], 'ix_batches_booth_mix')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batches', (t) => {
    t.dropIndex(['outcome', 'booth_id', 'mix_revision_id', 'mixed_at'], 'ix_batches_booth_mix')
  })
}
