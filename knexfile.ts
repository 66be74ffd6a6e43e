import type { Knex } from 'knex'
import { fileURLToPath } from 'node:url'
import { connectionOptions } from './server/database/connection'

/** For migrations alone: they run as the database's admin, never as the application's user. */
const config = {
  client: 'mysql2',
  connection: () => connectionOptions(process.env.DATABASE_ADMIN_URL ?? ''),
  migrations: {
    directory: fileURLToPath(new URL('./migrations', import.meta.url)),
    extension: 'ts',
    loadExtensions: ['.ts'],
  },
} satisfies Knex.Config

export default config
