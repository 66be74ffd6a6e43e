import type { Knex } from 'knex'
import { createTable, instant, optionalInstant, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'approvals', (t) => {
    primaryId(t)
    t.string('action', 64).notNullable()
    t.string('subject', 96).notNullable()
    t.string('reason', 400).notNullable()
    uuid(t, 'approved_by_user_id')
    instant(t, 'created_at')
    instant(t, 'expires_at')
    optionalInstant(t, 'used_at')
    reference(t, 'approvals', 'approved_by_user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('approvals')
}
