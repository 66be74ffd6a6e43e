import type { Knex } from 'knex'
import { createTable, mutable, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'job_steps', (t) => {
    primaryId(t)
    uuid(t, 'job_id')
    uuid(t, 'schedule_step_id')
    t.specificType('position', 'smallint unsigned').notNullable()
    t.enum('state', ['to-come', 'started', 'done']).notNullable().defaultTo('to-come')
    optionalUuid(t, 'booth_id')
    optionalUuid(t, 'gun_id')
    t.date('bench_list_on').nullable()
    mutable(t)
    t.unique(['job_id', 'position'], { indexName: 'uq_job_steps_position' })
    t.index(['state', 'bench_list_on'], 'ix_job_steps_bench_list')
    reference(t, 'job_steps', 'job_id', 'jobs')
    reference(t, 'job_steps', 'schedule_step_id', 'schedule_steps')
    reference(t, 'job_steps', 'booth_id', 'booths')
    reference(t, 'job_steps', 'gun_id', 'guns')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('job_steps')
}
