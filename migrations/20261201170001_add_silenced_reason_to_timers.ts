import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('timers', (t) => {
    t.string('silenced_reason', 400).nullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('timers', (t) => {
    t.dropColumn('silenced_reason')
  })
}
