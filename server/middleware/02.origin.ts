import { defineEventHandler, getRequestHeader } from 'h3'
import { useApp } from '../utils/app'
import { refuse } from '../utils/refuse'
import { isAllowedMethod, isSameOrigin } from '../utils/origin'

/** Refuses methods that we never answer and mutating requests that do not come from our own pages. */
export default defineEventHandler((event) => {
  if (!isAllowedMethod(event.method)) return refuse(event, 405, 'method', 'That method is not answered here.')
  const same = isSameOrigin({
    method: event.method,
    host: getRequestHeader(event, 'host'),
    origin: getRequestHeader(event, 'origin'),
    secFetchSite: getRequestHeader(event, 'sec-fetch-site'),
    hasCookie: getRequestHeader(event, 'cookie') !== undefined,
    hasBearer: getRequestHeader(event, 'authorization')?.startsWith('Bearer ') ?? false,
    publicUrl: useApp().config.publicUrl ?? undefined,
  })
  if (!same) return refuse(event, 403, 'cross-site', 'This request did not come from a page of this shop.')
})
