import type { H3Event } from 'h3'
import { defineEventHandler, getQuery, getRequestHeader, getRouterParams, setResponseHeader, setResponseStatus } from 'h3'
import * as z from 'zod/mini'
import { EngineError } from '#shared/engine/error'
import type { Action } from '#shared/utils/permissions'
import { contextFor, useApp } from './app'
import { readJsonBody } from './body'
import { canonicalJson, type Canonical } from './canonical'
import type { Context, Idempotency, Principal } from './context'
import { principalName, requirePermission } from './context'
import { fromEngine, invalid, Refusal } from './errors'
import { keyedHash } from './hash'
import { countRequest } from './limits'

type Schema = z.ZodMiniType

/** What a route declares. It cannot answer without its permission having been checked. */
export interface RouteDefinition<B extends Schema, Q extends Schema, P extends Schema, A> {
  /** The row of the permission table, or `public` for what anyone may ask, signed in or not. */
  permission: Action | 'public'
  body?: B
  query?: Q
  params?: P
  /** Status of success; 200 unless said otherwise, 204 sends nothing. */
  status?: 200 | 201 | 204
  /** False for the few POSTs that need no Idempotency-Key. */
  idempotent?: boolean
  handle: (request: RouteRequest<z.infer<B>, z.infer<Q>, z.infer<P>>) => Promise<A> | A
}

interface RouteRequest<B, Q, P> {
  event: H3Event
  ctx: Context
  body: B
  query: Q
  params: P
}

const uuidPattern = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i

/**
 * The only way to make an API route: session, permission, input, call, answer, in this order, and one place
 * that turns a refusal into its HTTP answer.
 */
export function defineRoute<B extends Schema, Q extends Schema, P extends Schema, A>(
  route: RouteDefinition<B, Q, P, A>,
) {
  return defineEventHandler(async (event) => {
    try {
      const principal = admit(event, route.permission)
      if (principal.kind !== 'nobody') await countRequest(principal.user?.sessionId ?? principalName(principal))
      const params = parse(route.params, getRouterParams(event, { decode: true }), 'params')
      const query = parse(route.query, getQuery(event), 'query')
      const sent = event.method === 'GET' || event.method === 'HEAD' ? undefined : await readJsonBody(event.node.req)
      const key = route.idempotent === false || event.method !== 'POST' ? null : readKey(event)
      const body = parse(route.body, sent, 'body')
      const ctx = contextFor(principal, event.context.requestId, key === null ? undefined : claim(event, key, sent, route.status ?? 200))
      const answer = await route.handle({ event, ctx, body, query, params })
      setResponseHeader(event, 'Cache-Control', 'no-store')
      setResponseStatus(event, route.status ?? 200)
      return route.status === 204 ? null : answer
    } catch (error) {
      return answerError(event, error)
    }
  })
}

const nobody: Principal = { kind: 'nobody', user: null, device: null }

function admit(event: H3Event, permission: Action | 'public'): Principal {
  const principal = event.context.principal
  if (permission === 'public') return principal ?? nobody
  if (!principal) throw new Refusal(401, 'signed-out', 'Sign in first.')
  requirePermission(principal, permission)
  if (principal.user?.mustChangePassword && permission !== 'password:change') {
    throw new Refusal(403, 'password-change-due', 'Choose a password of your own first.')
  }
  return principal
}

function readKey(event: H3Event): string {
  const key = getRequestHeader(event, 'idempotency-key')
  if (!key || !uuidPattern.test(key)) {
    throw new Refusal(400, 'idempotency-key-missing', 'Send an Idempotency-Key header with a UUID.')
  }
  return key.toLowerCase()
}

/**
 * The body is hashed under the session secret: some bodies hold a password, which a plain hash in the database would
 * let somebody guess. Only a body that has passed its schema is hashed, since one nested too deep would end the walk.
 */
function claim(event: H3Event, key: string, body: unknown, status: number): Idempotency {
  const bodyHash = keyedHash(useApp().config.sessionSecret, canonicalJson(plain(body)))
  return { key, route: `POST ${event.path.split('?')[0]}`, status, bodyHash }
}

/** Bodies may hold fractions as JSON numbers where the schema will refuse them; hash them as text. */
function plain(value: unknown): Canonical {
  if (typeof value === 'number') return Number.isSafeInteger(value) ? value : String(value)
  if (Array.isArray(value)) return value.map(plain)
  if (value !== null && typeof value === 'object') {
    return Object.fromEntries(Object.entries(value).map(([key, member]) => [key, plain(member)]))
  }
  return (value ?? null) as Canonical
}

function parse<S extends Schema>(schema: S | undefined, value: unknown, where: string): z.infer<S> {
  if (!schema) return undefined as z.infer<S>
  const result = z.safeParse(schema, value ?? {})
  if (result.success) return result.data
  throw invalid(
    result.error.issues.map((issue) => ({
      path: issue.path.join('.') || (issue.code === 'unrecognized_keys' ? issue.keys.join(', ') : where),
      message: issue.message,
    })),
  )
}

function answerError(event: H3Event, error: unknown) {
  const refusal = error instanceof EngineError ? fromEngine(error) : error
  setResponseHeader(event, 'Cache-Control', 'no-store')
  if (refusal instanceof Refusal) {
    setResponseStatus(event, refusal.status)
    if (refusal.status === 429 || refusal.status === 503) {
      setResponseHeader(event, 'Retry-After', Number(refusal.extra.retryAfterS ?? 1))
    }
    return { code: refusal.code, message: refusal.message, fields: refusal.fields, ...refusal.extra }
  }
  useApp().log.error({ err: error, requestId: event.context.requestId, path: event.path.split('?')[0] }, 'request failed')
  setResponseStatus(event, 500)
  return { code: 'internal', message: 'Something failed on our side. What you sent is not lost; try again.', fields: [] }
}
