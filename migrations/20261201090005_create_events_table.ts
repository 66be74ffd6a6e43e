import type { Knex } from 'knex'
import { createTable, instant, optionalUuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'events', (t) => {
    t.bigInteger('seq').unsigned().notNullable().primary()
    t.string('type', 48).notNullable()
    instant(t, 'at')
    t.string('subject', 96).notNullable()
    optionalUuid(t, 'booth_id')
    t.text('payload', 'longtext').notNullable()
    t.index(['at'], 'ix_events_at')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('events')
}
