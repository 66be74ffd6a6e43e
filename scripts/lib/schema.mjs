import { existsSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { sql } from './mariadb.mjs'

const ADMIN_USER = 'potbell_admin'
const APP_USER = 'potbell_app'
/** With host names not resolved, a connection over loopback counts as 127.0.0.1, one over the socket as localhost. */
const HOSTS = ['127.0.0.1', 'localhost']

/**
 * Addresses of a schema for the application's user and for the admin.
 * @param {import('./mariadb.mjs').Database} database
 * @param {import('./secrets.mjs').Secrets} secrets
 * @param {string} schema
 */
export function databaseUrls(database, secrets, schema) {
  const at = `127.0.0.1:${database.port}/${schema}`
  return {
    DATABASE_URL: `mysql://${APP_USER}:${secrets.appPassword}@${at}`,
    DATABASE_ADMIN_URL: `mysql://${ADMIN_USER}:${secrets.adminPassword}@${at}`,
  }
}

/**
 * Makes schemas and both users where they are missing, with the passwords of the secrets. The application's user has no
 * rights here: they are granted table by table after the migrations.
 * @param {import('./mariadb.mjs').Database} database
 * @param {import('./secrets.mjs').Secrets} secrets
 * @param {string[]} schemas
 * @param {{ admin?: string }} [options] the pattern of schemas that the admin rules over
 */
export async function ensureSchemas(database, secrets, schemas, { admin = 'potbell' } = {}) {
  const user = (name, password) => HOSTS.flatMap((host) => {
    const account = `'${name}'@'${host}'`
    return [
      `CREATE USER IF NOT EXISTS ${account} IDENTIFIED BY '${password}'`,
      `ALTER USER ${account} IDENTIFIED BY '${password}'`,
    ]
  })
  await sql(database, [
    ...schemas.map(schema => `CREATE DATABASE IF NOT EXISTS \`${schema}\` CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_520_ci`),
    ...user(ADMIN_USER, secrets.adminPassword),
    ...user(APP_USER, secrets.appPassword),
    ...HOSTS.flatMap(host => adminRights(admin, `'${ADMIN_USER}'@'${host}'`)),
  ].join(';\n'))
}

/** To grant table by table the admin must see which accounts there are and what they may do now; no password hashes. */
function adminRights(schemas, account) {
  return [
    `GRANT ALL PRIVILEGES ON \`${schemas}\`.* TO ${account} WITH GRANT OPTION`,
    `GRANT SELECT (Host, User) ON mysql.user TO ${account}`,
    `GRANT SELECT ON mysql.tables_priv TO ${account}`,
  ]
}

/**
 * Frees the migrations' lock when a killed run left it taken. Only for a database of our own and only while holding the
 * folder's lock: then nobody else can be migrating.
 * @param {import('./mariadb.mjs').Database} database
 * @param {string} schema
 * @returns {Promise<boolean>} whether it was taken
 */
export async function freeMigrationLock(database, schema) {
  const table = `SELECT COUNT(*) FROM information_schema.tables WHERE table_schema = '${schema}' AND table_name = 'knex_migrations_lock'`
  if (await sql(database, table) !== '1') return false
  const freed = await sql(database, `UPDATE \`${schema}\`.knex_migrations_lock SET is_locked = 0 WHERE is_locked = 1; SELECT ROW_COUNT()`)
  return freed !== '0'
}

/**
 * Drops a schema whose first filling was cut off: nobody can have worked in it yet, and half a shop is of no use.
 * @param {import('./mariadb.mjs').Database} database
 * @param {string} schema
 * @returns {Promise<boolean>} whether one was dropped
 */
export async function dropUnfinished(database, schema) {
  if (!existsSync(fillingMark(database.folder))) return false
  await sql(database, `DROP DATABASE IF EXISTS \`${schema}\``)
  return true
}

const fillingMark = folder => join(folder, 'first-filling')

/** Marks that a first filling is under way, before the schema exists. */
export async function markFilling(database, schema) {
  const there = `SELECT COUNT(*) FROM information_schema.schemata WHERE schema_name = '${schema}'`
  if (await sql(database, there) === '0') writeFileSync(fillingMark(database.folder), '', { mode: 0o600 })
}

/** Marks that the first filling is done. */
export function markFilled(folder) {
  rmSync(fillingMark(folder), { force: true })
}
