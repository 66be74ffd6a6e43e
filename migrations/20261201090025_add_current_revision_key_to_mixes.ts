import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('mixes', (t) => {
    t.foreign('current_revision_id', 'fk_mixes_current_revision_id').references('id').inTable('mix_revisions')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('mixes', (t) => {
    t.dropForeign(['current_revision_id'], 'fk_mixes_current_revision_id')
  })
  // MariaDB keeps the index that it made for the key.
  await knex.schema.alterTable('mixes', (t) => {
    t.dropIndex(['current_revision_id'], 'fk_mixes_current_revision_id')
  })
}
