import { spawn } from 'node:child_process'
import { existsSync, mkdtempSync, openSync, closeSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir, userInfo } from 'node:os'
import { dirname, join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { findProgram, installFromDebian } from './debian.mjs'
import { isAlive, withLock } from './lock.mjs'
import { freePort, greets, isTaken } from './net.mjs'
import { Stop, commandLine, endTree, identity, must, run, tail } from './process.mjs'

/** A longer path of a Unix socket is refused by the system. */
const SOCKET_PATH_BYTES = 107
const READY_MS = 120_000
const ENDS_MS = 15_000

/**
 * @typedef {object} Database a running MariaDB of our own
 * @property {number} pid
 * @property {number} port on 127.0.0.1
 * @property {string} socket
 * @property {string} folder the data folder it belongs to
 * @property {boolean} found whether it ran already
 */

function programs() {
  return {
    server: findProgram(['mariadbd']),
    init: findProgram(['mariadb-install-db']),
    client: findProgram(['mariadb']),
    dump: findProgram(['mariadb-dump']),
  }
}

/** MariaDB's programs, installed from Debian when one is missing and we may. */
export async function ensureMariadb() {
  if (Object.values(programs()).includes(null)) {
    await installFromDebian('MariaDB', ['mariadb-server-core', 'mariadb-client'])
  }
  const found = programs()
  const missing = Object.entries(found).find(([, path]) => path === null)
  if (missing) throw new Stop(`MariaDB is installed but incomplete: its ${missing[0]} program is missing.`)
  return found
}

const paths = folder => ({
  data: join(folder, 'mariadb'),
  pid: join(folder, 'mariadb.pid'),
  log: join(folder, 'mariadb.log'),
  state: join(folder, 'mariadb.json'),
  lock: join(folder, 'mariadb.lock'),
})

function readState(folder) {
  try {
    return JSON.parse(readFileSync(paths(folder).state, 'utf8'))
  }
  catch (error) {
    if (error.code === 'ENOENT' || error instanceof SyntaxError) return {}
    throw error
  }
}

function writeState(folder, state) {
  const file = paths(folder).state
  writeFileSync(`${file}.${process.pid}`, JSON.stringify(state), { mode: 0o600 })
  renameSync(`${file}.${process.pid}`, file)
}

/**
 * The MariaDB that runs in this data folder now, whoever started it. A process that merely has the number of the pid
 * file is told apart by its command line.
 * @param {string} folder
 * @returns {{ pid: number, port: number, socket: string } | null}
 */
export function findRunning(folder) {
  const { pid: file, data } = paths(folder)
  const noted = existsSync(file) ? Number(readFileSync(file, 'utf8').trim()) : undefined
  for (const pid of [noted, readState(folder).pid]) {
    const args = pid === undefined ? null : commandLine(pid)
    if (!args?.includes(`--datadir=${data}`)) continue
    const value = name => args.find(arg => arg.startsWith(`--${name}=`))?.slice(name.length + 3)
    return { pid, port: Number(value('port')), socket: value('socket') ?? '' }
  }
  return null
}

/**
 * Where the socket goes: into the data folder, or into a short folder of its own when that path would be too long.
 * @param {string} folder
 * @returns {string}
 */
export function socketPath(folder) {
  const near = join(folder, 'mariadb.sock')
  if (Buffer.byteLength(near) <= SOCKET_PATH_BYTES) return near
  const base = Buffer.byteLength(tmpdir()) < 80 ? tmpdir() : '/tmp'
  return join(mkdtempSync(join(base, 'potbell-')), 'db.sock')
}

function clearSocket(folder, socket) {
  if (!socket) return
  rmSync(socket, { force: true })
  if (dirname(socket) !== folder) rmSync(dirname(socket), { recursive: true, force: true })
}

async function initialise(folder, found) {
  const { data } = paths(folder)
  if (existsSync(data)) return
  // Made aside and moved: a folder that was cut off half made is never taken for a database.
  const draft = `${data}.new`
  rmSync(draft, { recursive: true, force: true })
  const me = userInfo().username
  await must('The database folder could not be made:', found.init, [
    '--no-defaults', `--datadir=${draft}`, `--user=${me}`, '--skip-test-db',
    '--auth-root-authentication-method=socket', `--auth-root-socket-user=${me}`,
  ], { capture: true })
  renameSync(draft, data)
}

function launch(folder, found, { port, socket }) {
  const { data, pid, log } = paths(folder)
  const out = openSync(log, 'a', 0o600)
  // It leads a session of its own, outlives a killed run unharmed, and is found again by the next.
  const child = spawn(found.server, [
    '--no-defaults', `--datadir=${data}`, `--user=${userInfo().username}`, `--socket=${socket}`, `--pid-file=${pid}`,
    '--bind-address=127.0.0.1', `--port=${port}`, '--skip-name-resolve', '--skip-log-bin', `--log-error=${log}`,
    '--character-set-server=utf8mb4', '--collation-server=utf8mb4_unicode_520_ci', '--default-time-zone=+00:00',
    '--innodb-flush-log-at-trx-commit=1', '--local-infile=0',
  ], { stdio: ['ignore', out, out], detached: true })
  closeSync(out)
  child.unref()
  return new Promise((done, fail) => {
    child.once('error', fail)
    child.once('spawn', () => done(child.pid))
  })
}

/** Waits until the server greets; answers false when it died first. */
async function untilReady(pid, socket) {
  const until = Date.now() + READY_MS
  while (Date.now() < until) {
    if (identity(pid) === null) return false
    if (existsSync(socket) && await greets(socket)) return true
    await sleep(40)
  }
  throw new Stop(`MariaDB did not get ready within ${READY_MS / 1000} s.`)
}

async function bringUp(folder, found, keeper) {
  await initialise(folder, found)
  const before = readState(folder)
  clearSocket(folder, before.socket)
  rmSync(paths(folder).pid, { force: true })
  let port = before.port
  for (let attempt = 0; attempt < 3; attempt++) {
    if (!port || await isTaken(port)) port = await freePort()
    const socket = socketPath(folder)
    // Noted before and after, so that an end in between knows what to end.
    writeState(folder, { port, socket, keeper })
    const pid = await launch(folder, found, { port, socket })
    writeState(folder, { pid, port, socket, keeper })
    if (await untilReady(pid, socket)) return { pid, port, socket }
    clearSocket(folder, socket)
    // Between choosing a port and binding it another program may have taken it.
    port = undefined
  }
  const { log } = paths(folder)
  throw new Stop([`MariaDB does not start in ${folder}; the end of its log:`, ...tail(readFileSync(log, 'utf8'))].join('\n'))
}

/**
 * Starts MariaDB in a data folder, or takes over the one that runs there.
 * @param {string} folder
 * @param {{ keep?: boolean }} [options] `keep`: it runs on after us, until it is stopped by name
 * @returns {Promise<Database>}
 */
export async function startDatabase(folder, { keep = false } = {}) {
  const found = await ensureMariadb()
  return withLock(paths(folder).lock, 'database', async () => {
    const running = findRunning(folder)
    // One found while it still comes up (its starter was killed meanwhile) is waited for.
    const usable = running !== null && await untilReady(running.pid, running.socket)
    const me = keep ? 'kept' : { pid: process.pid, born: identity(process.pid) }
    const database = usable ? running : await bringUp(folder, found, me)
    const { keeper } = readState(folder)
    // Whoever keeps it goes on keeping it; one that nobody keeps any more becomes ours.
    const taken = keep || (keeper !== 'kept' && !isAlive(keeper ?? null))
    if (usable && taken) writeState(folder, { ...database, keeper: me })
    return { ...database, folder, found: usable }
  })
}

/**
 * Ends the MariaDB of a data folder when it is this process that keeps it.
 * @param {string} folder
 * @param {number} graceMs
 */
export async function releaseDatabase(folder, graceMs) {
  if (readState(folder).keeper?.pid === process.pid) await stopDatabase(folder, graceMs)
}

/**
 * Ends the MariaDB of a data folder cleanly and clears its traces.
 * @param {string} folder
 * @param {number} [graceMs] after that by force, which loses nothing that was acknowledged
 * @returns {Promise<boolean>} whether one ran
 */
export async function stopDatabase(folder, graceMs = ENDS_MS) {
  const running = findRunning(folder)
  if (running) await endTree(running.pid, graceMs)
  clearSocket(folder, running?.socket ?? readState(folder).socket)
  rmSync(paths(folder).pid, { force: true })
  return running !== null
}

/**
 * Runs statements as the owner of the machine's account, through the socket: no password is involved.
 * @param {Database} database
 * @param {string} statements
 * @returns {Promise<string>} rows, one a line, columns parted by tabs
 */
export async function sql(database, statements) {
  const { client } = await ensureMariadb()
  const { code, output, errors } = await run(client, [
    '--no-defaults', `--socket=${database.socket}`, `--user=${userInfo().username}`, '--batch', '--skip-column-names',
  ], { capture: true, input: statements })
  if (code !== 0) throw new Stop(['The database refused a statement of its set-up:', ...tail(errors)].join('\n'))
  return output.trimEnd()
}

/**
 * Copies one schema into another, empty one.
 * @param {Database} database
 * @param {string} from
 * @param {string} to
 */
export async function copySchema(database, from, to) {
  const { dump } = await ensureMariadb()
  const copy = await must('The database could not be copied:', dump, [
    '--no-defaults', `--socket=${database.socket}`, `--user=${userInfo().username}`,
    '--single-transaction', '--routines', '--triggers', from,
  ], { capture: true })
  await sql(database, `USE \`${to}\`;\n${copy}`)
}
