import type { Knex } from 'knex'

/** What must not meet in the booth that an amendment names, as it was known then; null where nothing clashes. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('amendments', (t) => {
    t.text('clash', 'mediumtext').nullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('amendments', (t) => {
    t.dropColumn('clash')
  })
}
