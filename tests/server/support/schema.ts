import { execFile } from 'node:child_process'
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import type { Knex } from 'knex'
import { connectionOptions, createKnex } from '../../../server/database/connection'

const adminUrl = process.env.DATABASE_ADMIN_URL ?? ''
const appUrl = process.env.DATABASE_URL ?? ''

const root = fileURLToPath(new URL('../../..', import.meta.url))
const run = promisify(execFile)

/** A schema beside the server's, so that nobody else fires timers in it or adds to its ledger. */
export interface Schema {
  /** Address for the application's user. */
  url: string
  admin: Knex
  /** As the application's user. */
  db: Knex
  /** Runs the project's own migration command on it; `latest` sets the grants too. Answers what the command says. */
  migrate(direction: 'latest' | 'rollback'): Promise<Record<string, unknown>>
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
  const migrate = async (direction: 'latest' | 'rollback') => {
    const env = { ...process.env, DATABASE_ADMIN_URL: inSchema(adminUrl, schema), DATABASE_URL: inSchema(appUrl, schema) }
    const { stdout } = await run(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts', direction], { cwd: root, env })
    return JSON.parse(stdout.trim().split('\n').at(-1) ?? '{}') as Record<string, unknown>
  }
  if (migrated && !(await isMigrated(admin))) await migrate('latest')
  const close = async () => {
    await db.destroy()
    await admin.destroy()
  }
  const drop = async () => {
    await admin.raw('DROP DATABASE IF EXISTS ??', [schema])
    await close()
  }
  return { url: inSchema(appUrl, schema), admin, db, migrate, drop, close }
}

/** True when an earlier test file has brought the schema up to date. */
async function isMigrated(admin: Knex): Promise<boolean> {
  if (!(await admin.schema.hasTable('knex_migrations'))) return false
  const done = await admin('knex_migrations').select<{ name: string }[]>('name')
  return readdirSync(join(root, 'migrations')).every((file) => done.some(({ name }) => name === file))
}

function inSchema(url: string, schema: string): string {
  const changed = new URL(url)
  changed.pathname = `/${schema}`
  return changed.href
}
