import type { Knex } from 'knex'
import { createTable } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'sign_in_limits', (t) => {
    t.string('key', 255).notNullable().primary()
    t.integer('points').notNullable().defaultTo(0)
    t.bigInteger('expire').unsigned().nullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('sign_in_limits')
}
