import { say } from '../lib/process.mjs'
import { asOwner, restartDatabase } from './place.mjs'

/** So many copies of the demo's batches go in with one statement. */
const AT_ONCE = 100

/** What the log reads of a batch, and the column that holds the batch's id. */
const TABLES = { batches: 'id', batch_components: 'batch_id', batch_current: 'batch_id', batch_uses: 'batch_id' }

/** What differs in a copy: its instants lie some hours before its pattern's, so that the log reaches back and days mix. */
const COPIED = {
  code: 'CONCAT(LPAD(s.seq, 6, \'0\'), t.code)',
  // The snapshot of a batch's sums is read with one batch only and would fill the disk.
  snapshot: '\'{}\'',
  mixed_at: 't.mixed_at - INTERVAL s.seq * 137 MINUTE',
  state: 'IF(t.state = \'stopped\', t.state, \'emptied\')',
}

/** A column whose value the database works out by itself is not copied. */
async function columnsOf(place, schema, table) {
  const names = await asOwner(place, `SELECT column_name FROM information_schema.columns
    WHERE table_schema = '${schema}' AND table_name = '${table}' AND is_generated = 'NEVER'`)
  return names.split('\n').filter(name => name !== TABLES[table])
}

function copyInto(table, names, from, until) {
  const id = TABLES[table]
  return `INSERT INTO ${table} (${[id, ...names].map(name => `\`${name}\``).join(', ')})
    SELECT CONCAT(LPAD(LOWER(HEX(s.seq)), 8, '0'), SUBSTR(p.id, 9)), ${names.map(name => COPIED[name] ?? `t.\`${name}\``).join(', ')}
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
  const columns = []
  for (const table of Object.keys(TABLES)) columns.push([table, await columnsOf(place, schema, table)])
  for (let from = 1; from <= copies; from += AT_ONCE) {
    const until = Math.min(copies, from + AT_ONCE - 1)
    await asOwner(place, `${use} ${columns.map(([table, names]) => copyInto(table, names, from, until)).join(';\n')}`)
  }
  await asOwner(place, `USE \`${schema}\`; DROP TABLE bench_patterns; ANALYZE TABLE ${Object.keys(TABLES).join(', ')}`)
}

/** As the product's own database runs: its settings, its cache cold. */
export const settleDatabase = place => restartDatabase(place)
