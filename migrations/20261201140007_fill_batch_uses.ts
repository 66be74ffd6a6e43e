import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`INSERT INTO batch_uses (used_id, mixed_at, batch_id)
    SELECT DISTINCT p.lot_id, b.mixed_at, b.id FROM batch_pours p JOIN batches b ON b.id = p.batch_id
    UNION SELECT DISTINCT x.material_id, b.mixed_at, b.id FROM batch_components x JOIN batches b ON b.id = x.batch_id`)
}

export async function down(knex: Knex): Promise<void> {
  await knex('batch_uses').delete()
}
