import type { Knex } from 'knex'
import { createTable, mutable, optionalInstant, optionalUuid, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'mixes', (t) => {
    primaryId(t)
    t.string('code', 32).notNullable()
    t.string('name', 120).notNullable()
    optionalUuid(t, 'current_revision_id')
    optionalInstant(t, 'archived_at')
    mutable(t)
    t.unique(['code'], { indexName: 'uq_mixes_code' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('mixes')
}
