import type { Knex } from 'knex'
import { createTable, instant, optionalInstant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'applications', (t) => {
    primaryId(t)
    uuid(t, 'job_id')
    uuid(t, 'job_step_id')
    t.enum('kind', ['prepare', 'coat', 'sand', 'inspect']).notNullable()
    t.specificType('coat_number', 'tinyint unsigned').nullable()
    t.enum('face', ['front', 'back', 'both', 'edges', 'all']).nullable()
    instant(t, 'first_at')
    instant(t, 'last_at')
    t.boolean('last_assumed').notNullable().defaultTo(false)
    optionalUuid(t, 'booth_id')
    optionalUuid(t, 'gun_id')
    optionalUuid(t, 'user_id')
    optionalInstant(t, 'opens_at')
    optionalInstant(t, 'closing_at')
    optionalInstant(t, 'closes_at')
    t.text('details', 'longtext').notNullable()
    instant(t, 'created_at')
    t.index(['job_step_id', 'last_at'], 'ix_applications_job_step')
    reference(t, 'applications', 'job_id', 'jobs')
    reference(t, 'applications', 'job_step_id', 'job_steps')
    reference(t, 'applications', 'booth_id', 'booths')
    reference(t, 'applications', 'gun_id', 'guns')
    reference(t, 'applications', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('applications')
}
