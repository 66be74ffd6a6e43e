import type { Knex } from 'knex'
import { firstRow } from '../utils/raw'
import { privileges, tables, type TableKind } from './tables'

/**
 * Grants the application's user exactly the listed privileges, table by table.
 * What the user had before is revoked first, so that a table taken off a list is closed again.
 *
 * @param admin connection of the user that owns the schema and may grant
 * @param user name of the application's database user; it must exist for at least one of its hosts
 * @throws when the user exists for no host, or the connection may not grant
 */
export async function applyGrants(admin: Knex, user: string): Promise<void> {
  const rows = await admin('mysql.user').select<{ Host: string }[]>('Host').where('User', user)
  if (rows.length === 0) throw new Error(`database user ${user} does not exist`)
  const { name: database } = await firstRow<{ name: string | null }>(admin, 'SELECT DATABASE() AS name')
  if (!database) throw new Error('no database is selected')
  for (const { Host: host } of rows) {
    await revokeTables(admin, database, user, host)
    for (const kind of Object.keys(tables) as TableKind[]) {
      for (const table of tables[kind]) {
        await admin.raw(`GRANT ${privileges[kind]} ON ??.?? TO ?@?`, [database, table, user, host])
      }
    }
  }
}

async function revokeTables(admin: Knex, database: string, user: string, host: string): Promise<void> {
  const granted = await admin('mysql.tables_priv')
    .select<{ Table_name: string }[]>('Table_name')
    .where({ Db: database, User: user, Host: host })
  for (const { Table_name: table } of granted) {
    await admin.raw('REVOKE ALL PRIVILEGES ON ??.?? FROM ?@?', [database, table, user, host])
  }
}
