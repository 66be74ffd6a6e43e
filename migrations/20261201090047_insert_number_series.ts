import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex('number_series').insert([
    { name: 'batch', prefix: 'B-', next_number: 1 },
    { name: 'job', prefix: 'J-', next_number: 1 },
  ])
}

export async function down(knex: Knex): Promise<void> {
  await knex('number_series').delete()
}
