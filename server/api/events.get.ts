import { Readable } from 'node:stream'
import { defineEventHandler, getRequestHeader, setResponseHeader } from 'h3'
import { EventsQuery } from '#shared/schemas/live'
import { audienceOf } from '../live/audience'
import { EventStream } from '../live/stream'
import { useApp } from '../utils/app'
import { defineRoute } from '../utils/handler'

/** Opens the stream. What the browser remembers of its last event counts before what the address says. */
const route = defineRoute({
  permission: 'live:read',
  query: EventsQuery,
  handle: ({ event, ctx, query }) => {
    const remembered = getRequestHeader(event, 'last-event-id')
    const last = remembered !== undefined && /^\d{1,15}$/.test(remembered) ? remembered : query.lastEventId
    const { principal, db, clock } = ctx
    const { hub, log } = useApp()
    const stream = new EventStream({
      db, clock, hub, log,
      listener: { sessionId: principal.user?.sessionId ?? null, deviceId: principal.device?.id ?? null },
      audience: audienceOf(principal, query.boothId),
      lastEventId: last === undefined ? null : Number(last),
    })
    event.node.res.once('close', () => {
      stream.end()
      stream.resume()
    })
    stream.open().catch((error: unknown) => log.error({ err: error }, 'a stream could not be opened'))
    return stream
  },
})

/** No proxy on the way may hold events back, pack them or keep them. */
export default defineEventHandler(async (event) => {
  const answer = await route(event)
  if (!(answer instanceof Readable)) return answer
  setResponseHeader(event, 'Content-Type', 'text/event-stream; charset=utf-8')
  setResponseHeader(event, 'Cache-Control', 'no-store, no-transform')
  setResponseHeader(event, 'X-Accel-Buffering', 'no')
  return answer
})
