import { join } from 'node:path'
import { isAlive, readHolder } from './lib/lock.mjs'
import { findRunning, sql, stopDatabase } from './lib/mariadb.mjs'
import { dataFolder } from './lib/paths.mjs'
import { Stop, main, say } from './lib/process.mjs'
import { databaseUrls, markFilled } from './lib/schema.mjs'
import { readSecrets } from './lib/secrets.mjs'
import { checkNode, readSettings } from './lib/settings.mjs'
import { checkEnvironment, claimFolder, describeMigrations, fillShop, migrate, openShop } from './lib/shop.mjs'
import { mustRunFile, runFile } from './lib/typescript.mjs'

const USAGE = `npm run db -- COMMAND
  start           starts MariaDB and leaves it running
  stop            ends it
  url             prints the addresses of the running database, passwords included
  migrate         brings tables and grants up to date
  rollback --yes  takes all migrations back; deletes all data
  seed            fills an empty database with the demo shop
  reset --yes     deletes all data and begins anew
  create-manager  makes a first manager in an empty shop
  run FILE.ts     runs a file with the database's addresses in its environment`

const settings = () => readSettings(process.env)

function confirm(rest) {
  if (!rest.includes('--yes')) throw new Stop('This deletes all data of this shop; add --yes when that is meant.')
}

/** Opens the shop for one command alone. */
async function openAlone(what) {
  await claimFolder(dataFolder(process.env), `npm run db -- ${what}`)
  await checkEnvironment(process.env)
  return openShop(process.env, settings())
}

/** Opens the shop beside whoever else works on it now. */
async function openBeside(options = {}) {
  await checkEnvironment(process.env)
  return openShop(process.env, settings(), { ...options, alone: false })
}

function mustBeOurs() {
  if (settings().external) throw new Stop('DATABASE_URL names a database of your own: start and stop it yourself.')
}

const commands = {
  async start() {
    mustBeOurs()
    const { database } = await openBeside({ keep: true })
    say(`MariaDB runs on 127.0.0.1:${database?.port} until "npm run db -- stop".`)
  },
  async stop() {
    mustBeOurs()
    const folder = dataFolder(process.env)
    const holder = readHolder(join(folder, 'run.lock'))
    if (isAlive(holder)) throw new Stop(`"${holder.what}" works with this database (process ${holder.pid}): end that one first.`)
    say(await stopDatabase(folder) ? 'MariaDB ended.' : 'No MariaDB ran.')
  },
  url() {
    mustBeOurs()
    const folder = dataFolder(process.env)
    const running = findRunning(folder)
    if (!running) throw new Stop('No MariaDB runs here: start it with "npm run db -- start".')
    const urls = databaseUrls({ ...running, folder, found: true }, readSecrets(folder), 'potbell')
    for (const [name, value] of Object.entries(urls)) say(`${name}=${value}`)
  },
  async migrate() {
    const shop = await openAlone('migrate')
    const { applied } = await migrate(shop.env)
    markFilled(shop.folder)
    say(applied.length > 0 ? describeMigrations(applied) : 'Nothing to migrate.')
  },
  async rollback(rest) {
    confirm(rest)
    const shop = await openAlone('rollback')
    await mustRunFile('The migrations could not be taken back:', 'scripts/migrate.ts', shop.env, { more: ['rollback'], capture: true })
    markFilled(shop.folder)
    say('All migrations are taken back.')
  },
  async seed() {
    const shop = await openAlone('seed')
    const { users } = await migrate(shop.env)
    if (users > 0) throw new Stop('This database is not empty; the demo shop is only put into an empty one.')
    await fillShop(shop, { host: '127.0.0.1', demo: true })
  },
  async reset(rest) {
    confirm(rest)
    mustBeOurs()
    const first = await openAlone('reset')
    await sql(first.database, 'DROP DATABASE potbell')
    const shop = await openShop(process.env, settings())
    await fillShop(shop, { ...settings(), host: '127.0.0.1' })
    say('The shop begins anew.')
  },
  async 'create-manager'(rest) {
    const shop = await openBeside()
    await migrate(shop.env)
    return runFile('seeds/create-manager.ts', shop.env, rest)
  },
  async run([file, ...rest]) {
    if (!file) throw new Stop(USAGE)
    const shop = await openBeside()
    return runFile(file, shop.env, rest)
  },
}

await main(async () => {
  checkNode()
  const [name = '', ...rest] = process.argv.slice(2)
  if (!Object.hasOwn(commands, name)) throw new Stop(USAGE)
  return await commands[name](rest) ?? 0
}, { interrupted: 130 })
