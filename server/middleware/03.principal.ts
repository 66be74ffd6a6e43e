import { defineEventHandler, getCookie } from 'h3'
import { findDevice, findSessionUser } from '../repositories/sessions'
import { useApp } from '../utils/app'
import { readDeviceToken } from '../utils/cookies'
import { sha256 } from '../utils/hash'
import { refuse } from '../utils/refuse'

/**
 * Finds out who asks, from the database at every request: a cookie that was sealed before a sign-out is only a
 * random id that no row answers to any more.
 */
export default defineEventHandler(async (event) => {
  if (!event.path.startsWith('/api/')) return
  // The session route that comes with the cookie library would hand out the cookie's content.
  if (event.path.startsWith('/api/_auth')) return refuse(event, 404, 'not-found', 'There is nothing here.')
  const { db } = useApp()
  const deviceToken = readDeviceToken(event)
  const device = deviceToken ? await findDevice(sha256(deviceToken), db) : null
  const user = await findUser()
  event.context.device = device
  if (user) event.context.principal = { kind: 'user', user, device }
  else if (device) event.context.principal = { kind: 'device', user: null, device }

  async function findUser() {
    const name = useRuntimeConfig().session.name ?? ''
    if (!getCookie(event, name)) return null
    const token = (await getUserSession(event)).secure?.token
    return token ? findSessionUser(sha256(token), db) : null
  }
})
