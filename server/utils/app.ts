import type { Knex } from 'knex'
import type { Logger } from 'pino'
import type { EventHub } from '../live/hub'
import type { Clock } from './clock'
import type { Config } from './config'
import type { Context, Idempotency, Principal } from './context'

/** What one process of the server holds from its start to its end. */
export interface App {
  config: Config
  db: Knex
  clock: Clock
  hub: EventHub
  log: Logger
}

let running: App | null = null

/** Called once by the start-up plugin. */
export function setApp(app: App): void {
  running = app
}

/** @throws when the process has not started or has already closed */
export function useApp(): App {
  if (!running) throw new Error('the server has not started')
  return running
}

/** The context that a route hands to its service. */
export function contextFor(principal: Principal, requestId: string, idempotency?: Idempotency): Context {
  const { db, clock, hub } = useApp()
  return { db, clock, principal, requestId, wake: hub.wake, idempotency }
}
