import type { Knex } from 'knex'

// Reckoned by the database, so that the filter can never disagree with the columns that it sums up.
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`ALTER TABLE batch_current ADD COLUMN deviates TINYINT(1)
    AS (out_of_tolerance = 1 OR corrected = 1 OR state = 'stopped' OR COALESCE(used, 'in-time') <> 'in-time') STORED`)
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batch_current', (t) => t.dropColumn('deviates'))
}
