import type { Knex } from 'knex'
import { createTable, mutable, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'jobs', (t) => {
    primaryId(t)
    t.string('code', 32).notNullable()
    t.string('title', 160).notNullable()
    t.string('customer', 160).nullable()
    uuid(t, 'schedule_revision_id')
    t.date('due_on').nullable()
    t.enum('state', ['planned', 'running', 'done', 'held']).notNullable()
    t.string('notes', 2000).nullable()
    mutable(t)
    t.unique(['code'], { indexName: 'uq_jobs_code' })
    t.index(['state', 'due_on'], 'ix_jobs_state')
    reference(t, 'jobs', 'schedule_revision_id', 'schedule_revisions')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('jobs')
}
