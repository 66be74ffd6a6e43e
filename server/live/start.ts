import type { Knex } from 'knex'
import type { Clock } from '../utils/clock'
import { Housekeeper } from './housekeeper'
import { EventHub } from './hub'
import type { LiveLog } from './loop'
import { EventPump } from './pump'
import { RedisWake } from './redis'
import { Scheduler } from './scheduler'

export interface LiveOptions {
  db: Knex
  clock: Clock
  log: LiveLog
  redisUrl: string | null
}

/** The live part of one process. */
export interface Live {
  hub: EventHub
  pump: EventPump
  /** Ends the streams, then the timers, then the pump; resolves when nothing of it touches the database any more. */
  stop(): Promise<void>
}

/** Starts hub, pump, scheduler and housekeeper. It may be called before the database answers: each keeps trying. */
export function startLive({ db, clock, log, redisUrl }: LiveOptions): Live {
  const hub = new EventHub()
  const pump = new EventPump({ db, clock, hub, log })
  const redis = redisUrl ? new RedisWake(redisUrl, hub, () => pump.wake(), log) : null
  const scheduler = new Scheduler({ db, clock, log, wake: hub.wake })
  const housekeeper = new Housekeeper({ db, clock, log })
  pump.start()
  scheduler.start()
  housekeeper.start()
  return {
    hub,
    pump,
    async stop() {
      hub.close()
      await Promise.all([scheduler.stop(), housekeeper.stop()])
      redis?.close()
      await pump.stop()
    },
  }
}
