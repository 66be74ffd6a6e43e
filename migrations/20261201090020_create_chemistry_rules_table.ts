import type { Knex } from 'knex'
import { createTable, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'chemistry_rules', (t) => {
    primaryId(t)
    t.string('first_chemistry', 40).notNullable()
    t.string('second_chemistry', 40).notNullable()
    t.enum('scope', ['booth', 'bin', 'adjacent-steps']).notNullable()
    t.enum('verdict', ['blocked', 'caution']).notNullable()
    t.string('advice', 400).notNullable()
    t.unique(['first_chemistry', 'second_chemistry', 'scope'], { indexName: 'uq_chemistry_rules_pair' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('chemistry_rules')
}
