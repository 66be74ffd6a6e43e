/** What the origin rule looks at. Header values as received, missing ones undefined. */
export interface OriginFacts {
  method: string
  host: string | undefined
  origin: string | undefined
  secFetchSite: string | undefined
  hasCookie: boolean
  hasBearer: boolean
  publicUrl: string | undefined
}

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS'])
const allowedMethods = new Set([...safeMethods, 'POST', 'PUT', 'PATCH', 'DELETE'])

/** True for the methods that the product answers at all. */
export const isAllowedMethod = (method: string): boolean => allowedMethods.has(method)

/**
 * A mutating request must come from our own pages: either the browser says so, or its origin is the host asked.
 * A bearer token without cookies cannot be sent by a foreign page and is exempt.
 */
export function isSameOrigin(facts: OriginFacts): boolean {
  if (safeMethods.has(facts.method)) return true
  if (facts.hasBearer && !facts.hasCookie) return true
  if (facts.secFetchSite !== undefined) return facts.secFetchSite === 'same-origin'
  if (facts.origin === undefined) return false
  const originHost = hostOf(facts.origin)
  if (originHost === null) return false
  return originHost === facts.host || (facts.publicUrl !== undefined && originHost === hostOf(facts.publicUrl))
}

function hostOf(url: string): string | null {
  return URL.canParse(url) ? new URL(url).host : null
}
