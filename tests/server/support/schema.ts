import { fileURLToPath } from 'node:url'
import type { Knex } from 'knex'
import { connectionOptions, createKnex } from '../../../server/database/connection'
import { applyGrants } from '../../../server/database/grants'

const adminUrl = process.env.DATABASE_ADMIN_URL ?? ''
const appUrl = process.env.DATABASE_URL ?? ''

/** How the project's migrations are found and recorded. */
export const migrations: Knex.MigratorConfig = {
  directory: fileURLToPath(new URL('../../../migrations', import.meta.url)),
  extension: 'ts',
  loadExtensions: ['.ts'],
}

/** A schema beside the server's, so that nobody else fires timers in it or adds to its ledger. */
export interface Schema {
  admin: Knex
  /** As the application's user. */
  db: Knex
  /** Drops the schema too. */
  drop(): Promise<void>
  close(): Promise<void>
}

/** @param poolMax most connections of the application's user */
export async function openSchema(name: string, { migrated = true, poolMax = 25 } = {}): Promise<Schema> {
  const schema = `${connectionOptions(adminUrl).database}_${name}`
  const server = createKnex(adminUrl, { poolMax: 1 })
  await server.raw('CREATE DATABASE IF NOT EXISTS ?? CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_520_ci', [schema])
  await server.destroy()
  const admin = createKnex(inSchema(adminUrl, schema), { poolMax: 5 })
  const db = createKnex(inSchema(appUrl, schema), { poolMax })
  if (migrated) {
    await admin.migrate.latest(migrations)
    await applyGrants(admin, connectionOptions(appUrl).user)
  }
  const close = async () => {
    await db.destroy()
    await admin.destroy()
  }
  const drop = async () => {
    await admin.raw('DROP DATABASE IF EXISTS ??', [schema])
    await close()
  }
  return { admin, db, drop, close }
}

function inSchema(url: string, schema: string): string {
  const changed = new URL(url)
  changed.pathname = `/${schema}`
  return changed.href
}
