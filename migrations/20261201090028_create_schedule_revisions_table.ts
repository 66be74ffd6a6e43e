import type { Knex } from 'knex'
import { createTable, mutable, optionalInstant, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'schedule_revisions', (t) => {
    primaryId(t)
    uuid(t, 'schedule_id')
    t.integer('number').unsigned().notNullable()
    t.enum('state', ['draft', 'released', 'superseded']).notNullable()
    t.string('notes', 1000).nullable()
    optionalInstant(t, 'released_at')
    optionalUuid(t, 'released_by_user_id')
    mutable(t)
    t.unique(['schedule_id', 'number'], { indexName: 'uq_schedule_revisions_number' })
    reference(t, 'schedule_revisions', 'schedule_id', 'schedules')
    reference(t, 'schedule_revisions', 'released_by_user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('schedule_revisions')
}
