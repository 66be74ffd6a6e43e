import { createKnex } from '../server/database/connection'
import { verifyChain } from '../server/utils/audit'
import { readMigrationEnvironment } from '../server/utils/config'

/** Walks the chain of the record from its first entry; ends with 1 at the first entry that does not fit. */
const db = createKnex(readMigrationEnvironment(process.env).databaseUrl, { poolMax: 1 })
try {
  const verdict = await verifyChain(db)
  console.log(verdict.ok
    ? `The chain is whole: ${verdict.entries} entries.`
    : `Entry ${verdict.firstBadSeq} does not fit: ${verdict.fault}. ${verdict.entries} entries before it do.`)
  process.exitCode = verdict.ok ? 0 : 1
} finally {
  await db.destroy()
}
