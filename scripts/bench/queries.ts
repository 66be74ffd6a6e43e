import { BatchListQuery } from '#shared/schemas/batches'
import type { Role } from '#shared/types/roles'
import mysql from 'mysql2'
import * as z from 'zod/mini'
import { createKnex } from '../../server/database/connection'
import { listBatches } from '../../server/services/batch-log'
import type { Principal } from '../../server/utils/context'
import { encodeCursor } from '../../server/utils/keyset'

/**
 * Prints the pages of the log that are measured: the address of each as the API takes it, and the SELECT that the product
 * answers it with, word for word as it goes to the database.
 */
const db = createKnex(process.env.DATABASE_URL ?? '', { poolMax: 1 })

const role: Role = 'foreman'
const principal: Principal = {
  kind: 'user', device: null, user: { id: '', role, name: '', initials: '', email: '', sessionId: '' },
}

/** What a page is answered with; the shop's settings, which are read too, are not the page. */
async function selectOf(query: Record<string, string>): Promise<string> {
  const said: string[] = []
  const hear = ({ sql, bindings }: { sql: string, bindings: Parameters<typeof mysql.format>[1] }) => void said.push(mysql.format(sql, bindings, false, 'Z'))
  db.on('query', hear)
  await listBatches({ db, principal }, z.parse(BatchListQuery, query))
  db.removeListener('query', hear)
  const select = said.find(text => text.includes('batch_current'))
  if (!select) throw new Error('the log was answered without its SELECT')
  return select
}

const [middle] = await db('batches').select<{ id: string, mixed_at: Date }[]>('id', 'mixed_at')
  .orderBy([{ column: 'mixed_at', order: 'desc' }, { column: 'id', order: 'desc' }]).limit(1)
  .offset(Math.floor(Number((await db('batches').count<{ count: string }[]>({ count: '*' }))[0]?.count) / 2))
if (!middle) throw new Error('the log is empty')

const pages = {
  first: {},
  deep: { state: 'emptied', deviations: 'true', cursor: encodeCursor([middle.mixed_at.getTime(), middle.id]) },
}
const answered: { name: string, path: string, sql: string }[] = []
for (const [name, query] of Object.entries(pages)) {
  const search = new URLSearchParams(query).toString()
  answered.push({ name, path: `/api/batches${search && `?${search}`}`, sql: await selectOf(query) })
}
process.stdout.write(`${JSON.stringify(answered)}\n`)
await db.destroy()
