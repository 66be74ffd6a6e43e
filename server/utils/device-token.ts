import { createHmac } from 'node:crypto'
import { useApp } from './app'
import { principalName, type Context } from './context'
import { randomToken } from './hash'

/**
 * The token of a device that is being enrolled. It is derived from the request's idempotency key under the session
 * secret, so that a request sent twice hands out the same token that was stored the first time.
 */
export function deviceTokenFor(ctx: Context): string {
  if (!ctx.idempotency) return randomToken()
  return createHmac('sha256', useApp().config.sessionSecret)
    .update(`device:${principalName(ctx.principal)}:${ctx.idempotency.key}`)
    .digest('hex')
}
