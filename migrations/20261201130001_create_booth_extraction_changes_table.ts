import type { Knex } from 'knex'
import { createTable, instant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'booth_extraction_changes', (t) => {
    primaryId(t)
    uuid(t, 'booth_id')
    t.enum('extraction', ['running', 'off', 'unknown']).notNullable()
    t.enum('before', ['running', 'off', 'unknown']).notNullable()
    instant(t, 'at')
    optionalUuid(t, 'user_id')
    instant(t, 'created_at')
    t.index(['booth_id', 'at'], 'ix_booth_extraction_changes_booth')
    reference(t, 'booth_extraction_changes', 'booth_id', 'booths')
    reference(t, 'booth_extraction_changes', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('booth_extraction_changes')
}
