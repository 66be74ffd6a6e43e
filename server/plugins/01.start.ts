import { startLive } from '../live/start'
import { createKnex } from '../database/connection'
import { demandDurableCommits } from '../services/health'
import { setApp } from '../utils/app'
import { databaseClock, movableClock } from '../utils/clock'
import { readConfig } from '../utils/config'
import { createLog } from '../utils/log'

/** Opens what one process holds, in order, and closes it in the reverse order: streams first, the database last. */
export default defineNitroPlugin((nitro) => {
  const config = readConfig(process.env)
  const log = createLog(config.logLevel)
  const db = createKnex(config.databaseUrl, { poolMax: config.poolMax, log })
  const clock = config.testClock ? movableClock : databaseClock
  const live = startLive({ db, clock, log, redisUrl: config.redisUrl })
  setApp({ config, db, clock, hub: live.hub, log })
  demandDurableCommits(db).catch((error: unknown) => {
    log.fatal({ err: error }, 'the database cannot be used')
    process.exit(1)
  })
  // Nitro waits for open connections before its close hook; an open stream would hold it up for ever.
  const endStreams = () => live.hub.close()
  process.once('SIGTERM', endStreams)
  process.once('SIGINT', endStreams)
  nitro.hooks.hookOnce('close', async () => {
    await live.stop()
    await db.destroy()
    log.info('closed')
  })
})
