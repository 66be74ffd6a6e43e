import type { Knex } from 'knex'

const name = 'ix_batch_events_gun'
const columns = ['gun_id', 'kind', 'at']

/** What a gun was loaded from next is asked at every first shot; without it all that the gun ever did would be read. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batch_events', (t) => t.index(columns, name))
}

export async function down(knex: Knex): Promise<void> {
  // The gun's foreign key needs an index of its own before the wider one can go.
  await knex.raw('ALTER TABLE batch_events ADD INDEX fk_batch_events_gun_id (gun_id)')
  await knex.schema.alterTable('batch_events', (t) => t.dropIndex(columns, name))
}
