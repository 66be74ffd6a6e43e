import type { Knex } from 'knex'
import { createTable, instant, optionalInstant, optionalUuid, reference, uuid } from '../server/database/columns'

/** An application as it is now: its moments, booth and window by the amendments of its batch. Can be made anew from the record. */
export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'application_current', (t) => {
    uuid(t, 'application_id')
    instant(t, 'first_at')
    instant(t, 'last_at')
    optionalUuid(t, 'booth_id')
    optionalInstant(t, 'opens_at')
    optionalInstant(t, 'closing_at')
    optionalInstant(t, 'closes_at')
    instant(t, 'updated_at')
    t.primary(['application_id'])
    reference(t, 'application_current', 'application_id', 'applications')
    reference(t, 'application_current', 'booth_id', 'booths')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('application_current')
}
