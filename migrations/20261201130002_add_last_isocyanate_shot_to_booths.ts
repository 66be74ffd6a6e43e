import type { Knex } from 'knex'
import { optionalInstant } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('booths', (t) => {
    optionalInstant(t, 'isocyanate_shot_at')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('booths', (t) => {
    t.dropColumn('isocyanate_shot_at')
  })
}
