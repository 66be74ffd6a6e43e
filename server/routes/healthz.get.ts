import { checkDatabase } from '../services/health'
import { useApp } from '../utils/app'

/** 200 only when the database answers and has this build's migrations. */
export default defineEventHandler(async (event) => {
  const health = await checkDatabase(useApp().db, useRuntimeConfig().lastMigration)
  setResponseHeader(event, 'Cache-Control', 'no-store')
  setResponseStatus(event, health.ok ? 200 : 503)
  return { status: health.ok ? 'ok' : 'unavailable', fault: health.fault }
})
