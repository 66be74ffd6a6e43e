import { say } from '../lib/process.mjs'
import { asOwner, restartDatabase } from './place.mjs'

/** So many copies of the demo's batches go in with one statement. */
const AT_ONCE = 100

const COLUMNS = {
  batches: `code, plan_id, pot_number, pot_count, outcome, mix_revision_id, job_id, job_step_id, purpose, booth_id, gun_id, scale_id,
    mixed_by_user_id, device_id, mixed_at, reactive_at, sealed_at, target_total_g, poured_total_g, area_m2, film_weight_gsm, film_weight_is, coats,
    transfer_efficiency_pct, pot_life_min, pot_life_basis, late_at, ends_at, review, snapshot`,
  batch_components: 'component_index, material_id, role, parts, planned_g, target_g, poured_g, deviation_pct, verdict',
  batch_current: `state, mixed_at, booth_id, reactive_at, late_at, ends_at, first_spray_at, last_spray_at, closed_at, leftover_g,
    leftover_weighed, disposal, used, worst_deviation_pct, out_of_tolerance, corrected, review_open, amended, version, created_at, updated_at`,
}

/** A copy's instants lie some hours before its pattern's, so that the log reaches back and days mix. */
const copied = {
  code: 'CONCAT(LPAD(s.seq, 6, \'0\'), t.code)',
  // The snapshot of a batch's sums is read with one batch only and would fill the disk.
  snapshot: '\'{}\'',
  mixed_at: 't.mixed_at - INTERVAL s.seq * 137 MINUTE',
  state: 'IF(t.state = \'stopped\', t.state, \'emptied\')',
}

function copyInto(table, id, from, until) {
  const names = COLUMNS[table].split(',').map(name => name.trim())
  const values = names.map(name => copied[name] ?? `t.${name}`)
  return `INSERT INTO ${table} (${id}, ${names.join(', ')})
    SELECT CONCAT(LPAD(LOWER(HEX(s.seq)), 8, '0'), SUBSTR(p.id, 9)), ${values.join(', ')}
    FROM bench_patterns p JOIN ${table} t ON t.${id} = p.id JOIN seq_${from}_to_${until} s`
}

/**
 * Copies the demo's batches until a schema holds so many, with their components and present states, by the owner of the
 * database: the log cannot tell them from mixed ones.
 * @param {import('./place.mjs').Place} place
 * @param {string} schema
 * @param {number} count of batches at least
 */
export async function fillBatches(place, schema, count) {
  const use = `USE \`${schema}\`; SET SESSION foreign_key_checks = 0; SET SESSION unique_checks = 0;`
  const there = Number(await asOwner(place, `USE \`${schema}\`; SELECT COUNT(*) FROM batches`))
  const copies = Math.ceil((count - there) / there)
  if (copies <= 0) return
  say(`Making ${count} batches out of ${there} …`)
  // For the filling alone: the database is started anew afterwards.
  await asOwner(place, `SET GLOBAL innodb_buffer_pool_size = 2147483648; SET GLOBAL innodb_flush_log_at_trx_commit = 0;
    ${use} CREATE TABLE bench_patterns (id CHAR(36) CHARACTER SET ascii COLLATE ascii_bin PRIMARY KEY) SELECT id FROM batches`)
  for (let from = 1; from <= copies; from += AT_ONCE) {
    const until = Math.min(copies, from + AT_ONCE - 1)
    await asOwner(place, `${use} ${[
      copyInto('batches', 'id', from, until),
      copyInto('batch_components', 'batch_id', from, until),
      copyInto('batch_current', 'batch_id', from, until),
    ].join(';\n')}`)
  }
  await asOwner(place, `USE \`${schema}\`; DROP TABLE bench_patterns; ANALYZE TABLE batches, batch_components, batch_current`)
}

/** As the product's own database runs: its settings, its cache cold. */
export const settleDatabase = place => restartDatabase(place)
