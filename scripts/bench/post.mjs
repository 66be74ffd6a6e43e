import { randomUUID } from 'node:crypto'
import { copySchema, findRunning } from '../lib/mariadb.mjs'
import { Stop, say } from '../lib/process.mjs'
import { figure, median, medianRatio } from './arithmetic.mjs'
import { signInOften } from './http.mjs'
import { asOwner, require, serveProduct } from './place.mjs'

const SCHEMA = 'potbell_bench'
const BARE = 'potbell_bench_bare'
const SESSIONS = 16

/** The rows that sealing one batch inserts, and how they are found again; its key is its id. Sealing is what comes last. */
const SEALED = `(SELECT MAX(seq) FROM ${SCHEMA}.audit_entries WHERE subject = CONCAT('batch:', :id))`
const TABLES = {
  batches: 'id = :id',
  batch_components: 'batch_id = :id',
  batch_pours: 'batch_id = :id',
  batch_pieces: 'batch_id = :id',
  batch_current: 'batch_id = :id',
  lot_movements: 'batch_id = :id',
  // Those that the draft had set already stand in the copy.
  timers: `subject_id = :id AND id NOT IN (SELECT id FROM ${BARE}.timers WHERE subject_id = :id)`,
  audit_entries: `seq = ${SEALED}`,
  // What is told belongs to the entry before it.
  events: `seq > ${SEALED} AND seq < (SELECT COALESCE(MIN(seq), ~0) FROM ${SCHEMA}.audit_entries WHERE seq > ${SEALED})`,
  idempotency_keys: 'idempotency_key = :id',
}

/** What a demo's bench can mix: a mix that hardens, with a lot for each of its components. */
function chooseMix({ mixes, lots, booths, guns, scales }) {
  const lotOf = new Map(lots.filter(({ stockG }) => Number(stockG) > 1000).map(lot => [lot.materialId, lot.id]))
  const mix = mixes.find(({ basis, potLifeMin, components }) => basis === 'weight' && potLifeMin !== null
    && components.some(({ reactive }) => reactive) && components.every(({ materialId, role }) => lotOf.has(materialId) && role !== 'peroxide'))
  if (!mix) throw new Stop('The demo shop has no mix with a lot for each component.')
  return { mix, lotOf, boothId: booths[0].id, gunId: guns[0].id, scaleId: scales[0].id }
}

function draftOf({ mix, lotOf, boothId, gunId, scaleId }, userId, now) {
  return {
    seq: 1, planId: randomUUID(), potNumber: 1, potCount: 1, mixRevisionId: mix.revisionId, purpose: 'bench', boothId, gunId, scaleId,
    mixedByUserId: userId, plan: { totalG: '30', scaleDivisionG: '0.1' },
    components: mix.components.map(({ index, materialId, parts }) => ({
      index,
      pours: [{ lotId: lotOf.get(materialId), grams: (Number(parts) / 10).toFixed(1), at: new Date(now - (20 - index) * 1000).toISOString(), source: 'typed', round: 0 }],
    })),
  }
}

/** Runs `work` over the items, so many at once. @returns how many a second */
async function rate(items, atOnce, work) {
  const queue = [...items.entries()]
  const began = performance.now()
  await Promise.all(Array.from({ length: atOnce }, async (_, lane) => {
    for (let next = queue.shift(); next; next = queue.shift()) await work(next[1], lane)
  }))
  return items.length / (performance.now() - began) * 1000
}

async function prepareDrafts(people, count) {
  const [first] = people
  const choice = chooseMix(await first.get('/api/bench/snapshot'))
  const { user } = await first.get('/api/session')
  const { now } = await first.get('/api/time')
  const ids = Array.from({ length: count }, () => randomUUID())
  await rate(ids, people.length, (id, lane) => people[lane].send('PUT', `/api/batch-drafts/${id}`, draftOf(choice, user.id, Date.parse(now))))
  return ids
}

/** The columns of each table that a value can be given for: some the database works out by itself. */
async function columnsOf(connection) {
  const [rows] = await connection.query(`SELECT table_name AS tableName, column_name AS columnName FROM information_schema.columns
    WHERE table_schema = '${SCHEMA}' AND is_generated = 'NEVER'`)
  return table => rows.filter(({ tableName }) => tableName === table).map(({ columnName }) => columnName)
}

/** The rows of a sealed batch as statements with their values, one a table. */
async function rowsOf(connection, id, columns) {
  const statements = []
  for (const [table, where] of Object.entries(TABLES)) {
    const [rows] = await connection.query(`SELECT * FROM ${SCHEMA}.${table} WHERE ${where}`, { id })
    if (rows.length === 0) continue
    const names = columns(table)
    statements.push({ sql: `INSERT INTO ${BARE}.${table} (${names.map(name => `\`${name}\``).join(', ')}) VALUES ?`, values: [rows.map(row => names.map(name => row[name]))] })
  }
  for (const table of ['batches', 'audit_entries', 'events', 'idempotency_keys']) {
    if (!statements.some(({ sql }) => sql.includes(`.${table} `))) throw new Stop(`Sealing a batch left nothing in ${table}.`)
  }
  return statements
}

async function insertBare(connection, statements) {
  await connection.beginTransaction()
  for (const { sql, values } of statements) await connection.query(sql, values)
  await connection.commit()
}

/** One round: the product seals its drafts, then the same rows are inserted bare. */
async function round(drafts, { people, lanes, atOnce }) {
  let turn = 0
  const ours = await rate(drafts, atOnce, draftId => people[turn++ % people.length].send('POST', '/api/batches', { draftId }, draftId))
  const columns = await columnsOf(lanes[0])
  const statements = []
  for (const id of drafts) statements.push(await rowsOf(lanes[0], id, columns))
  const theirs = await rate(statements, atOnce, (one, lane) => insertBare(lanes[lane], one))
  return [ours, theirs]
}

/**
 * Sealing batches against bare transactions that insert the same rows into the same tables of the same server.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measurePost(place) {
  const { createConnection } = require('mysql2/promise')
  const effort = place.quick ? { rounds: 3, batches: 20 } : { rounds: 7, batches: 80 }
  const server = await serveProduct(place, 'bench')
  const people = await signInOften(server.env.BASE_URL, 'sprayer', SESSIONS)
  const CLIENTS = [1, 8]
  const drafts = await prepareDrafts(people, CLIENTS.length * (effort.rounds + 1) * effort.batches)
  const database = { ...findRunning(place.folder), folder: place.folder }
  await asOwner(place, `CREATE DATABASE ${BARE} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_520_ci`)
  await copySchema(database, SCHEMA, BARE)
  const flush = await asOwner(place, 'SELECT @@innodb_flush_log_at_trx_commit, @@sync_binlog, @@log_bin')
  if (!flush.startsWith('1')) throw new Stop(`The database does not flush at each commit: ${flush}`)
  const uri = place.shop.environment(SCHEMA).DATABASE_ADMIN_URL
  const lanes = await Promise.all(Array.from({ length: Math.max(...CLIENTS) }, () => createConnection({ uri, namedPlaceholders: true, timezone: 'Z', dateStrings: true, supportBigNumbers: true, bigNumberStrings: true })))
  const rows = []
  for (const atOnce of CLIENTS) {
    say(`${atOnce === 1 ? 'One client' : `${atOnce} clients`} …`)
    const pairs = []
    for (let count = 0; count <= effort.rounds; count++) {
      const pair = await round(drafts.splice(0, effort.batches), { people, lanes, atOnce })
      // The first round warms both.
      if (count > 0) pairs.push(pair)
    }
    const value = medianRatio(pairs)
    rows.push({
      figure: `\`POST /api/batches\`, ${atOnce === 1 ? 'one client, so one flush a commit on both sides' : `${atOnce} clients at once`}, against bare transactions that insert the same rows`,
      target: '≥ 0.4 ×', least: 0.4, value,
      measured: `${figure(value)} × (${figure(median(pairs.map(([one]) => one)))} to ${figure(median(pairs.map(([, other]) => other)))} a second)`,
    })
  }
  await Promise.all(lanes.map(lane => lane.end()))
  await asOwner(place, `DROP DATABASE ${BARE}`)
  await server.close()
  return rows
}
