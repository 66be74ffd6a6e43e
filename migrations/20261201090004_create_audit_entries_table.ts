import type { Knex } from 'knex'
import { createTable, hash, instant } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'audit_entries', (t) => {
    t.bigInteger('seq').unsigned().notNullable().primary()
    t.specificType('format', 'smallint unsigned').notNullable()
    instant(t, 'at')
    t.string('action', 64).notNullable()
    t.string('actor', 64).notNullable()
    t.string('subject', 96).notNullable()
    t.text('bytes', 'longtext').notNullable()
    hash(t, 'prev_hash')
    hash(t, 'hash')
    t.index(['subject', 'seq'], 'ix_audit_entries_subject')
    t.index(['actor', 'seq'], 'ix_audit_entries_actor')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('audit_entries')
}
