import { useApp } from './app'
import { principalName, type Context } from './context'
import { keyedHash, randomToken } from './hash'

/**
 * The token of a device that is being enrolled. It is derived from the request's idempotency key under the session
 * secret, so that a request sent twice hands out the same token that was stored the first time.
 */
export function deviceTokenFor(ctx: Context): string {
  if (!ctx.idempotency) return randomToken()
  return keyedHash(useApp().config.sessionSecret, `device:${principalName(ctx.principal)}:${ctx.idempotency.key}`)
}
