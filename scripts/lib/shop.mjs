import { join } from 'node:path'
import { takeLock } from './lock.mjs'
import { releaseDatabase, startDatabase } from './mariadb.mjs'
import { ensurePackages } from './packages.mjs'
import { dataFolder, root } from './paths.mjs'
import { Stop, atEnd, say } from './process.mjs'
import { databaseUrls, dropUnfinished, ensureSchemas, freeMigrationLock, markFilled, markFilling } from './schema.mjs'
import { readSecrets } from './secrets.mjs'
import { isLoopback } from './settings.mjs'
import { mustRunFile } from './typescript.mjs'

const SCHEMA = 'potbell'
/** With the server's grace before it, an end takes no more than three seconds. */
const DATABASE_GRACE_MS = 1600

/**
 * @typedef {object} Shop what a command works on
 * @property {string} folder the data folder
 * @property {Record<string, string | undefined>} env with DATABASE_URL and DATABASE_ADMIN_URL
 * @property {import('./secrets.mjs').Secrets} secrets
 * @property {import('./mariadb.mjs').Database | null} database null when the operator brought one of his own
 * @property {boolean} restarted whether a first filling was cut off and is begun anew
 */

/** @typedef {{ applied: string[], users: number, demoUsers: number }} Status after migrating */

/**
 * Takes the data folder for this command alone. What a killed run left there is ended and cleared.
 * @param {string} folder
 * @param {string} what
 */
export async function claimFolder(folder, what) {
  const lock = await takeLock(join(folder, 'run.lock'), what)
  if (!lock.held) {
    throw new Stop(`"${lock.holder.what}" already works on ${folder} (process ${lock.holder.pid}): end that one first, or name another folder with POTBELL_DATA_DIR.`)
  }
  atEnd(() => lock.release())
  if (lock.leftover) say('Cleared what a killed run left behind.')
}

/**
 * Stops on the first look at a bad setting, by its name.
 * @param {Record<string, string | undefined>} env
 */
export async function checkEnvironment(env) {
  await ensurePackages(root, env)
  await mustRunFile('Potbell was not started.', 'scripts/check-config.ts', env)
}

/**
 * Starts the database where it is ours to start, with its schema and its users.
 * @param {Record<string, string | undefined>} env
 * @param {{ external: boolean }} settings
 * @param {{ keep?: boolean, alone?: boolean }} [options] `alone`: the folder is claimed, so leftovers may be cleared
 * @returns {Promise<Shop>}
 */
export async function openShop(env, settings, { keep = false, alone = true } = {}) {
  const folder = dataFolder(env)
  const secrets = readSecrets(folder)
  if (settings.external) return { folder, env, secrets, database: null, restarted: false }
  atEnd(() => releaseDatabase(folder, DATABASE_GRACE_MS))
  const database = await startDatabase(folder, { keep })
  const restarted = alone && await dropUnfinished(database, SCHEMA)
  if (restarted) say('The first filling of the database was cut off; it begins anew.')
  if (alone) await markFilling(database, SCHEMA)
  await ensureSchemas(database, secrets, [SCHEMA])
  if (alone && await freeMigrationLock(database, SCHEMA)) say('Freed the migrations\' lock of a killed run.')
  return { folder, env: { ...env, ...databaseUrls(database, secrets, SCHEMA) }, secrets, database, restarted }
}

/**
 * Brings the tables and the grants up to date.
 * @param {Record<string, string | undefined>} env with both addresses of the database
 * @returns {Promise<Status>}
 */
export async function migrate(env) {
  const output = await mustRunFile('The database could not be migrated:', 'scripts/migrate.ts', env, { more: ['latest'], capture: true })
  return JSON.parse(output.trimEnd().split('\n').at(-1) ?? '')
}

/**
 * Migrates, and fills an empty database with the demo shop.
 * @param {Shop} shop
 * @param {{ host: string, demo: boolean }} settings
 * @returns {Promise<Status>}
 */
export async function fillShop(shop, settings) {
  let status = await migrate(shop.env)
  if (status.applied.length > 0) say(describeMigrations(status.applied))
  refuseOpenDemo(status, settings)
  if (status.users === 0 && settings.demo) {
    say('Filling the empty database with the demo shop …')
    await mustRunFile('The demo shop could not be made; its own words are above.', 'seeds/run.ts', shop.env)
    status = await migrate(shop.env)
  }
  markFilled(shop.folder)
  if (status.demoUsers > 0 && settings.demo) {
    await mustRunFile('The demo shop could not be refreshed; its own words are above.', 'seeds/refresh.ts', shop.env)
  }
  return status
}

/** One line about what was migrated. */
export function describeMigrations(applied) {
  return applied.length === 1 ? `Migrated ${applied[0]}` : `Migrated ${applied.length} steps, up to ${applied.at(-1)}`
}

/** The demo's passwords are public: with them the shop is never opened to the network. */
function refuseOpenDemo({ users, demoUsers }, { host, demo }) {
  if (isLoopback(host) || (demoUsers === 0 && (users > 0 || !demo))) return
  throw new Stop(`HOST=${host} would open this shop to the network while the demo's passwords stand, which are public: change them, or start an empty shop of your own with POTBELL_DEMO=0 and another POTBELL_DATA_DIR, or leave HOST out.`)
}

/**
 * What a newcomer needs to know once everything runs.
 * @param {string} url
 * @param {Status} status
 * @returns {string[]} lines
 */
export function welcome(url, { users, demoUsers }) {
  const lines = ['', `Potbell is at ${url}`]
  if (demoUsers > 0) {
    lines.push(
      '',
      'The demo shop, password "let the pot ring" for all three:',
      '  sprayer@potbell.example   mixes at the bench, notes sprays, silences and empties pots, reads the log and the plans',
      '  foreman@potbell.example   as the sprayer; also sees people and approves what a rule forbids',
      '  manager@potbell.example   as the foreman; also enrols and takes away booth screens and benches',
    )
  }
  if (users === 0) lines.push('', 'Nobody can sign in yet: make the first manager with "npm run db -- create-manager".')
  return [...lines, '', 'Ctrl-C ends it.']
}
