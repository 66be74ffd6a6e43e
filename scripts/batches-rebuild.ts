import { createKnex } from '../server/database/connection'
import { rebuildBatches } from '../server/services/batch-rebuild'
import { databaseClock } from '../server/utils/clock'
import { readMigrationEnvironment } from '../server/utils/config'
import { newId } from '../server/utils/ids'

/** Makes the present state of all batches anew from the record and says which ones were not what it says. */
const db = createKnex(readMigrationEnvironment(process.env).databaseUrl, { poolMax: 2 })
try {
  const { batches, changed } = await rebuildBatches({
    db, clock: databaseClock, principal: { kind: 'system', user: null, device: null }, requestId: newId(), wake: () => {},
  })
  console.log(`${batches} batches read; ${changed.length === 0 ? 'all were what the record says' : `put right: ${changed.join(', ')}`}.`)
} finally {
  await db.destroy()
}
