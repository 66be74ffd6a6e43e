import type { Knex } from 'knex'

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`UPDATE batch_current c JOIN batches b ON b.id = c.batch_id
    SET c.job_id = b.job_id, c.mixed_by_user_id = b.mixed_by_user_id, c.gun_id = b.gun_id, c.purpose = b.purpose, c.poured_total_g = b.poured_total_g,
      c.worst_role = (SELECT x.role FROM batch_components x WHERE x.batch_id = b.id AND x.role <> 'base' AND x.deviation_pct IS NOT NULL
        ORDER BY ABS(x.deviation_pct) DESC, x.component_index LIMIT 1)`)
}

export async function down(knex: Knex): Promise<void> {
  await knex('batch_current').update({ job_id: null, mixed_by_user_id: null, gun_id: null, purpose: null, poured_total_g: null, worst_role: null })
}
