import type { Knex } from 'knex'
import { createTable, instant, mutable, optionalInstant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'timers', (t) => {
    primaryId(t)
    t.enum('kind', ['pot-late', 'pot-up', 'window-opens', 'window-closing', 'window-closes', 'clearance', 'dry-sand', 'dry-stack', 'dry-pack', 'free']).notNullable()
    t.enum('subject_type', ['batch', 'application', 'booth', 'free']).notNullable()
    uuid(t, 'subject_id')
    optionalUuid(t, 'booth_id')
    t.string('label', 160).notNullable()
    instant(t, 'due_at')
    t.enum('state', ['waiting', 'fired', 'acknowledged', 'done', 'cancelled']).notNullable().defaultTo('waiting')
    optionalInstant(t, 'fired_at')
    optionalInstant(t, 'announced_at')
    optionalInstant(t, 'silenced_until')
    t.string('silenced_by', 120).nullable()
    optionalInstant(t, 'acknowledged_at')
    t.string('acknowledged_by', 120).nullable()
    optionalUuid(t, 'created_by_user_id')
    mutable(t)
    t.unique(['kind', 'subject_type', 'subject_id'], { indexName: 'uq_timers_subject' })
    t.index(['state', 'due_at'], 'ix_timers_due')
    reference(t, 'timers', 'booth_id', 'booths')
    reference(t, 'timers', 'created_by_user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('timers')
}
