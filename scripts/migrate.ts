import { createKnex } from '../server/database/connection'
import { applyGrants } from '../server/database/grants'
import { demandDurableCommits } from '../server/services/health'
import { readMigrationEnvironment } from '../server/utils/config'
import knexConfig from '../knexfile'

/**
 * `latest` brings the tables and then the grants up to date; `rollback` takes everything back. The last line printed
 * tells what is there: { applied, users, demoUsers }.
 */
async function main(direction: string | undefined): Promise<void> {
  if (direction !== 'latest' && direction !== 'rollback') throw new Error('Usage: migrate.ts latest|rollback')
  const { databaseUrl, databaseAdminUrl } = readMigrationEnvironment(process.env)
  const knex = createKnex(databaseAdminUrl, { poolMax: 2 })
  try {
    if (direction === 'rollback') {
      const [, names] = await knex.migrate.rollback(knexConfig.migrations, true) as [number, string[]]
      process.stdout.write(`${JSON.stringify({ rolledBack: names })}\n`)
      return
    }
    await demandAnswer(knex)
    await demandDurableCommits(knex)
    const [, applied] = await knex.migrate.latest(knexConfig.migrations) as [number, string[]]
    await applyGrants(knex, decodeURIComponent(new URL(databaseUrl).username))
    process.stdout.write(`${JSON.stringify({ applied, ...await countPeople(knex) })}\n`)
  }
  finally {
    await knex.destroy()
  }
}

/** @throws {Error} that names the setting when the database does not answer or does not let the admin in */
async function demandAnswer(knex: ReturnType<typeof createKnex>): Promise<void> {
  try {
    await knex.raw('SELECT 1')
  }
  catch (error) {
    const why = error instanceof Error && 'code' in error ? String(error.code) : String(error).split('\n')[0]
    throw new Error(`DATABASE_ADMIN_URL leads to no database that lets the admin in (${why}).`, { cause: error })
  }
}

/** Demo users are those whose public demo password still stands. */
async function countPeople(knex: ReturnType<typeof createKnex>): Promise<{ users: number, demoUsers: number }> {
  const row: { users: unknown, demoUsers: unknown } | undefined = await knex('users')
    .select(knex.raw('COUNT(*) AS users'), knex.raw('COALESCE(SUM(demo_password), 0) AS demoUsers')).first()
  return { users: Number(row?.users ?? 0), demoUsers: Number(row?.demoUsers ?? 0) }
}

try {
  await main(process.argv[2])
}
catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
  process.exitCode = 1
}
