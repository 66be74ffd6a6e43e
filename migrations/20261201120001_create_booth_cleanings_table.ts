import type { Knex } from 'knex'
import { createTable, instant, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'booth_cleanings', (t) => {
    primaryId(t)
    uuid(t, 'booth_id')
    instant(t, 'cleaned_at')
    uuid(t, 'user_id')
    instant(t, 'created_at')
    t.index(['booth_id', 'cleaned_at'], 'ix_booth_cleanings_booth')
    reference(t, 'booth_cleanings', 'booth_id', 'booths')
    reference(t, 'booth_cleanings', 'user_id', 'users')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('booth_cleanings')
}
