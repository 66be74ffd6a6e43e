import type { Knex } from 'knex'
import { createTable, mutable } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'settings', (t) => {
    t.string('name', 64).notNullable().primary()
    t.text('value', 'longtext').notNullable()
    mutable(t)
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('settings')
}
