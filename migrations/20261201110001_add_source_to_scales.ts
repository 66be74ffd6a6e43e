import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('scales', (t) => {
    t.enum('source', ['keypad', 'simulated']).notNullable().defaultTo('keypad')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('scales', (t) => {
    t.dropColumn('source')
  })
}
