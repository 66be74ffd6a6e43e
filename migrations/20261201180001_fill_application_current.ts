import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`INSERT INTO application_current (application_id, first_at, last_at, booth_id, opens_at, closing_at, closes_at, updated_at)
    SELECT id, first_at, last_at, booth_id, opens_at, closing_at, closes_at, created_at FROM applications`)
}

export async function down(knex: Knex): Promise<void> {
  await knex('application_current').delete()
}
