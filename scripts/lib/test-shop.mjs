import { closeSync, mkdirSync, mkdtempSync, openSync, readdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { serverEntry, useBuild } from './build.mjs'
import { serverEnvironment } from './environment.mjs'
import { takeLock } from './lock.mjs'
import { copySchema, startDatabase, stopDatabase } from './mariadb.mjs'
import { freePort } from './net.mjs'
import { root } from './paths.mjs'
import { atEnd, endTree, say } from './process.mjs'
import { databaseUrls, ensureSchemas } from './schema.mjs'
import { readSecrets } from './secrets.mjs'
import { serve } from './serve.mjs'
import { migrate } from './shop.mjs'
import { mustRunFile } from './typescript.mjs'

const PREFIX = 'test-'
const GRACE_MS = 1600

/** Suites that need a shop, each with a schema of its own. */
const SCHEMAS = {
  'server': 'potbell_server', 'e2e': 'potbell_e2e', 'e2e-office': 'potbell_e2e_office', 'e2e-floor': 'potbell_e2e_floor', 'bench': 'potbell_bench', 'bench-large': 'potbell_bench_large',
}

/** Removes data folders of test runs that were killed, with whatever they left running. */
async function sweep(base) {
  for (const name of readdirSync(base).filter(entry => entry.startsWith(PREFIX))) {
    const folder = join(base, name)
    const lock = await takeLock(join(folder, 'run.lock'), 'sweep')
    if (lock.held) await discard(folder, lock)
  }
}

async function discard(folder, lock) {
  await stopDatabase(folder, GRACE_MS)
  lock.release()
  rmSync(folder, { recursive: true, force: true })
}

/** A data folder for this run alone, gone when it ends. */
export async function openTestFolder() {
  const base = join(root, '.data')
  mkdirSync(base, { recursive: true, mode: 0o700 })
  await sweep(base)
  const folder = mkdtempSync(join(base, PREFIX))
  const lock = await takeLock(join(folder, 'run.lock'), 'npm test')
  atEnd(() => discard(folder, lock))
  return folder
}

/**
 * Starts a database with one demo shop a suite: made once, then copied, so that no suite sees another's doings.
 * @param {string} folder of `openTestFolder`
 * @param {Record<string, string>} env scrubbed
 * @param {(keyof typeof SCHEMAS)[]} suites
 */
export async function openTestShop(folder, env, suites) {
  say('Making the database of the tests …')
  const secrets = readSecrets(folder)
  const database = await startDatabase(folder)
  const [first = SCHEMAS.server, ...others] = suites.map(suite => SCHEMAS[suite])
  // Tests may make schemas of their own under this pattern, as the one that rolls all migrations back.
  await ensureSchemas(database, secrets, [first, ...others], { admin: 'potbell\\_%' })
  const environment = schema => ({ ...env, ...databaseUrls(database, secrets, schema) })
  await migrate(environment(first))
  await mustRunFile('The demo shop could not be made:', 'seeds/run.ts', environment(first), { capture: true })
  for (const schema of others) {
    await copySchema(database, first, schema)
    await migrate(environment(schema))
  }
  return { folder, secrets, environment }
}

/**
 * Starts the built server for one suite.
 * @param {Awaited<ReturnType<typeof openTestShop>>} shop
 * @param {keyof typeof SCHEMAS} suite
 * @param {Record<string, string>} [more] of the server's environment
 * @returns {Promise<{ env: Record<string, string>, close: () => Promise<void> }>} what the suite's tests are given
 */
export async function openTestServer(shop, suite, more = { POTBELL_TEST_CLOCK: '1' }) {
  const env = shop.environment(SCHEMAS[suite])
  await mustRunFile('The demo shop could not be refreshed:', 'seeds/refresh.ts', env, { capture: true })
  const host = '127.0.0.1'
  const port = await freePort()
  const dataFolder = join(shop.folder, suite)
  mkdirSync(dataFolder, { recursive: true, mode: 0o700 })
  const log = join(shop.folder, `${suite}.log`)
  const out = openSync(log, 'a', 0o600)
  useBuild()
  const { child, url } = await serve({
    env: {
      ...serverEnvironment(env, { databaseUrl: env.DATABASE_URL, sessionSecret: shop.secrets.sessionSecret, host, port, dataFolder }),
      ...more,
    },
    host,
    port,
    stdio: ['ignore', out, out],
  }).catch((error) => {
    error.log = log
    throw error
  }).finally(() => closeSync(out))
  return {
    log,
    env: { ...env, BASE_URL: url, SERVER_LOG: log, SERVER_ENTRY: serverEntry, POTBELL_DATA_DIR: dataFolder },
    close: () => endTree(child.pid, 1200),
  }
}
