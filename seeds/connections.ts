import { createKnex } from '../server/database/connection'
import { readMigrationEnvironment } from '../server/utils/config'
import type { Connections } from './demo/make'

export type { Connections }

/** Opens both connections from the environment and closes them whatever happens. */
export async function withConnections<T>(work: (connections: Connections) => Promise<T>): Promise<T> {
  const { databaseAdminUrl, databaseUrl } = readMigrationEnvironment(process.env)
  const admin = createKnex(databaseAdminUrl, { poolMax: 2 })
  const app = createKnex(databaseUrl, { poolMax: 4 })
  try {
    return await work({ admin, app })
  } finally {
    await Promise.all([admin.destroy(), app.destroy()])
  }
}

/** Something that whoever gave the command can put right: said in its own words, without a stack. */
export class Refused extends Error {}

/** Runs a command; a failure is told and ends with 1. */
export async function command(work: () => Promise<void>): Promise<void> {
  try {
    await work()
  } catch (error) {
    const told = error instanceof Refused ? error.message : error instanceof Error ? (error.stack ?? error.message) : String(error)
    process.stderr.write(`${told}\n`)
    process.exitCode = 1
  }
}
