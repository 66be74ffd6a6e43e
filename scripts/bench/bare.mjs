import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { address, freePort } from '../lib/net.mjs'
import { root } from '../lib/paths.mjs'
import { Stop, endTree, must, start } from '../lib/process.mjs'

/** As many connections to the database as the product holds unless told otherwise. */
const POOL = 10

const CONFIG = 'export default { preset: \'node-server\', compatibilityDate: \'2026-11-01\', srcDir: \'.\' }\n'

const ROUTE = `import { readFileSync } from 'node:fs'
import { defineEventHandler, getQuery } from 'h3'
import mysql from 'mysql2/promise'

const { url, pages } = JSON.parse(readFileSync(process.env.BENCH_PAGES, 'utf8'))
const pool = mysql.createPool({ uri: url, connectionLimit: ${POOL}, timezone: 'Z', dateStrings: ['DATE'], supportBigNumbers: true, bigNumberStrings: true })

export default defineEventHandler(async (event) => {
  const [rows] = await pool.query(pages[getQuery(event).page])
  return rows
})
`

/** Builds the bare Nitro application once: one route that sends a SELECT through mysql2 and answers the rows as JSON. */
async function build(place) {
  const folder = join(place.folder, 'bare')
  mkdirSync(join(folder, 'routes'), { recursive: true })
  writeFileSync(join(folder, 'nitro.config.mjs'), CONFIG)
  writeFileSync(join(folder, 'routes', 'rows.get.mjs'), ROUTE)
  await must('The bare application could not be built:', process.execPath, [join(root, 'node_modules', 'nitropack', 'dist', 'cli', 'index.mjs'), 'build', folder], {
    cwd: folder, env: { ...place.env, NODE_ENV: 'production' }, capture: true,
  })
  return join(folder, '.output', 'server', 'index.mjs')
}

/**
 * Serves the bare application for one schema.
 * @param {import('./place.mjs').Place} place
 * @param {string} url of the database
 * @param {{ name: string, sql: string }[]} pages
 */
export async function serveBare(place, url, pages) {
  place.bareEntry ??= await build(place)
  const port = await freePort()
  const list = join(place.folder, `pages-${port}.json`)
  writeFileSync(list, JSON.stringify({ url, pages: Object.fromEntries(pages.map(({ name, sql }) => [name, sql])) }), { mode: 0o600 })
  const child = start(process.execPath, [place.bareEntry], {
    env: { ...place.env, NODE_ENV: 'production', HOST: '127.0.0.1', PORT: String(port), BENCH_PAGES: list },
    stdio: ['ignore', 'ignore', 'inherit'],
  })
  const at = address('127.0.0.1', port)
  for (let tries = 0; tries < 200; tries++) {
    const answer = await fetch(`${at}/rows?page=${pages[0].name}`).catch(() => null)
    if (answer?.ok) return { url: at, close: () => endTree(child.pid, 1200) }
    await sleep(50)
  }
  throw new Stop('The bare application does not answer.')
}
