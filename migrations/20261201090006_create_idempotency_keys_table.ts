import type { Knex } from 'knex'
import { createTable, hash, instant, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'idempotency_keys', (t) => {
    t.string('principal', 96).notNullable()
    t.string('route', 120).notNullable()
    uuid(t, 'idempotency_key')
    hash(t, 'body_hash')
    t.specificType('status', 'smallint unsigned').nullable()
    t.text('answer', 'longtext').nullable()
    instant(t, 'created_at')
    t.primary(['principal', 'route', 'idempotency_key'])
    t.index(['created_at'], 'ix_idempotency_keys_created_at')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('idempotency_keys')
}
