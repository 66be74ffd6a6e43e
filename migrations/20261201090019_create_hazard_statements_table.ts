import type { Knex } from 'knex'
import { createTable } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'hazard_statements', (t) => {
    t.string('code', 20).notNullable().primary()
    t.enum('kind', ['H', 'EUH', 'P']).notNullable()
    t.string('text', 500).notNullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('hazard_statements')
}
