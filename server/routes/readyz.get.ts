import { checkDatabase } from '../services/health'
import { useApp } from '../utils/app'

/** 200 while this process takes requests: a process that is closing, or has lost its database, answers 503. */
export default defineEventHandler(async (event) => {
  const { db, hub } = useApp()
  const health = hub.closed ? { ok: false, fault: 'this process is closing' } : await checkDatabase(db, useRuntimeConfig().lastMigration)
  setResponseHeader(event, 'Cache-Control', 'no-store')
  setResponseStatus(event, health.ok ? 200 : 503)
  return { status: health.ok ? 'ready' : 'unavailable', fault: health.fault }
})
