import { setTimeout as sleep } from 'node:timers/promises'
import { startDatabase } from './mariadb.mjs'
import { Stop, identity, isEnding, say } from './process.mjs'

const WINDOW_MS = 60_000
const MOST_IN_WINDOW = 5
const LOOK_MS = 200

/**
 * Counts restarts, so that what dies again and again is not started for ever.
 * @param {string} what for people
 */
export function restartBudget(what) {
  const times = []
  return (now = Date.now()) => {
    times.push(now)
    while (times[0] < now - WINDOW_MS) times.shift()
    if (times.length > MOST_IN_WINDOW) {
      throw new Stop(`${what} ended ${times.length} times within a minute; it is not started again.`)
    }
  }
}

/**
 * Starts the database again when it dies.
 * @param {import('./mariadb.mjs').Database} first
 * @param {(database: import('./mariadb.mjs').Database) => Promise<void>} onMove called when it came back on another port
 * @returns {Promise<void>} settles at the end; rejects when it dies too often
 */
export async function keepDatabase(first, onMove) {
  const spend = restartBudget('MariaDB')
  let database = first
  while (!isEnding()) {
    const born = identity(database.pid)
    while (born !== null && identity(database.pid) === born) await sleep(LOOK_MS)
    if (isEnding()) return
    spend()
    say('MariaDB ended unexpectedly; starting it again.')
    const next = await startDatabase(first.folder)
    if (next.port !== database.port) await onMove(next)
    database = next
  }
}

/**
 * Starts the server and starts it again when it dies.
 * @param {() => Promise<{ child: import('node:child_process').ChildProcess, url: string }>} begin
 * @param {(url: string) => void} onFirst called once it is healthy for the first time
 * @returns {Promise<void>} as above
 */
export async function keepServer(begin, onFirst) {
  const spend = restartBudget('The server')
  let server = await begin()
  onFirst(server.url)
  while (!isEnding()) {
    const { code, signal } = await server.child.ended
    if (isEnding()) return
    spend()
    say(`The server ended unexpectedly (${signal ?? `code ${code}`}); starting it again.`)
    server = await begin()
  }
}
