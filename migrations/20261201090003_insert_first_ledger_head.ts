import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex('ledger_head').insert({ id: 1, seq: 0, hash: '0'.repeat(64) })
}

export async function down(knex: Knex): Promise<void> {
  await knex('ledger_head').delete()
}
