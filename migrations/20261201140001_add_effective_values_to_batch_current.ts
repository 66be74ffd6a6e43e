import type { Knex } from 'knex'
import { grams, optionalUuid } from '../server/database/columns'

// No foreign keys: these values come from the record, whose keys are checked, and each key would cost an index.
export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batch_current', (t) => {
    optionalUuid(t, 'job_id')
    optionalUuid(t, 'mixed_by_user_id')
    optionalUuid(t, 'gun_id')
    t.string('purpose', 200).nullable()
    grams(t, 'poured_total_g').nullable()
    t.string('worst_role', 12).nullable()
    t.text('effective', 'longtext').nullable()
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('batch_current', (t) => {
    t.dropColumns('job_id', 'mixed_by_user_id', 'gun_id', 'purpose', 'poured_total_g', 'worst_role', 'effective')
  })
}
