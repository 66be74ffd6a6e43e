import type { Knex } from 'knex'
import { createTable, mutable, optionalInstant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_drafts', (t) => {
    primaryId(t)
    t.integer('seq').unsigned().notNullable()
    t.string('code', 16).notNullable()
    uuid(t, 'plan_id')
    t.specificType('pot_number', 'smallint unsigned').notNullable()
    t.specificType('pot_count', 'smallint unsigned').notNullable()
    uuid(t, 'mix_revision_id')
    optionalUuid(t, 'job_step_id')
    optionalUuid(t, 'booth_id')
    optionalUuid(t, 'gun_id')
    optionalUuid(t, 'scale_id')
    uuid(t, 'mixed_by_user_id')
    optionalUuid(t, 'device_id')
    optionalInstant(t, 'reactive_at')
    t.enum('state', ['open', 'sealed', 'stopped', 'discarded']).notNullable().defaultTo('open')
    t.text('body', 'longtext').notNullable()
    mutable(t)
    t.unique(['code'], { indexName: 'uq_batch_drafts_code' })
    t.index(['state', 'reactive_at'], 'ix_batch_drafts_state')
    reference(t, 'batch_drafts', 'mix_revision_id', 'mix_revisions')
    reference(t, 'batch_drafts', 'job_step_id', 'job_steps')
    reference(t, 'batch_drafts', 'booth_id', 'booths')
    reference(t, 'batch_drafts', 'gun_id', 'guns')
    reference(t, 'batch_drafts', 'scale_id', 'scales')
    reference(t, 'batch_drafts', 'mixed_by_user_id', 'users')
    reference(t, 'batch_drafts', 'device_id', 'devices')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_drafts')
}
