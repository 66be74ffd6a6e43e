import type { Knex } from 'knex'
import { createTable, hash } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'ledger_head', (t) => {
    t.specificType('id', 'tinyint unsigned').notNullable().primary()
    t.bigInteger('seq').unsigned().notNullable()
    hash(t, 'hash')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('ledger_head')
}
