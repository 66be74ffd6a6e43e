import type { H3Event } from 'h3'
import { defineEventHandler, getCookie } from 'h3'
import type { Knex } from 'knex'
import { findDevice, findSessionUser } from '../repositories/sessions'
import { useApp } from '../utils/app'
import type { UserPrincipal } from '../utils/context'
import { readDeviceToken } from '../utils/cookies'
import { sha256 } from '../utils/hash'
import { refuse } from '../utils/refuse'
import { tokenOf } from '../utils/sealed-token'

/**
 * Finds out who asks, from the database at every request: a cookie that was sealed before a sign-out is only a
 * random id that no row answers to any more.
 */
export default defineEventHandler(async (event) => {
  if (!event.path.startsWith('/api/')) return
  // The session route that comes with the cookie library would hand out the cookie's content.
  if (event.path.startsWith('/api/_auth')) return refuse(event, 404, 'not-found', 'There is nothing here.')
  try {
    await identify(event)
  } catch (error) {
    useApp().log.error({ err: error, requestId: event.context.requestId }, 'who asks could not be looked up')
    return refuse(event, 503, 'unavailable', 'The database does not answer. Try again in a moment.')
  }
})

async function identify(event: H3Event): Promise<void> {
  const { db } = useApp()
  const deviceToken = readDeviceToken(event)
  const device = deviceToken ? await findDevice(sha256(deviceToken), db) : null
  const user = await findUser(event, db)
  event.context.device = device
  if (user) event.context.principal = { kind: 'user', user, device }
  else if (device) event.context.principal = { kind: 'device', user: null, device }
}

async function findUser(event: H3Event, db: Knex): Promise<UserPrincipal | null> {
  const sealed = getCookie(event, useRuntimeConfig().session.name ?? '')
  if (!sealed) return null
  const token = await tokenOf(sealed, async () => (await getUserSession(event)).secure?.token)
  return token ? findSessionUser(sha256(token), db) : null
}
