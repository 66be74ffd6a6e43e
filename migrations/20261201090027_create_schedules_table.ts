import type { Knex } from 'knex'
import { createTable, mutable, optionalInstant, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'schedules', (t) => {
    primaryId(t)
    t.string('code', 32).notNullable()
    t.string('name', 120).notNullable()
    optionalInstant(t, 'archived_at')
    mutable(t)
    t.unique(['code'], { indexName: 'uq_schedules_code' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('schedules')
}
