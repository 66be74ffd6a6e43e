import type { Knex } from 'knex'
import { createTable, hash, instant, optionalInstant, optionalUuid, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'sessions', (t) => {
    hash(t, 'id').primary()
    uuid(t, 'user_id')
    optionalUuid(t, 'device_id')
    instant(t, 'created_at')
    instant(t, 'last_seen_at')
    instant(t, 'expires_at')
    optionalInstant(t, 'ended_at')
    t.string('ended_reason', 40).nullable()
    t.index(['user_id', 'ended_at'], 'ix_sessions_user')
    reference(t, 'sessions', 'user_id', 'users')
    reference(t, 'sessions', 'device_id', 'devices')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('sessions')
}
