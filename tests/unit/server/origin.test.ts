import { describe, expect, it } from 'vitest'
import { isAllowedMethod, isSameOrigin, type OriginFacts } from '../../../server/utils/origin'

const facts = (over: Partial<OriginFacts>): OriginFacts => ({
  method: 'POST', host: 'pots.example:3000', origin: undefined, secFetchSite: undefined, hasCookie: true, hasBearer: false, publicUrl: undefined, ...over,
})

describe('the origin rule', () => {
  it.each([
    ['the browser says same-origin', facts({ secFetchSite: 'same-origin' }), true],
    ['the browser says same-site', facts({ secFetchSite: 'same-site', origin: 'http://pots.example:3000' }), false],
    ['the browser says cross-site', facts({ secFetchSite: 'cross-site' }), false],
    ['the browser says none, as for a typed address', facts({ secFetchSite: 'none' }), false],
    ['the origin is the host asked', facts({ origin: 'http://pots.example:3000' }), true],
    ['the origin has another port', facts({ origin: 'http://pots.example' }), false],
    ['the origin is null', facts({ origin: 'null' }), false],
    ['there is no origin at all', facts({}), false],
    ['a proxy hides the host but the public address is known', facts({ origin: 'https://pots.example', host: 'inner:3000', publicUrl: 'https://pots.example' }), true],
    ['another site behind the same proxy', facts({ origin: 'https://other.example', host: 'inner:3000', publicUrl: 'https://pots.example' }), false],
    ['a bearer token without cookies', facts({ hasCookie: false, hasBearer: true }), true],
    ['a bearer token beside a cookie', facts({ hasBearer: true }), false],
    ['a GET from anywhere', facts({ method: 'GET', secFetchSite: 'cross-site' }), true],
  ])('%s', (_, given, same) => {
    expect(isSameOrigin(given)).toBe(same)
  })

  it('answers the usual methods and no others', () => {
    expect(['GET', 'HEAD', 'OPTIONS', 'POST', 'PUT', 'PATCH', 'DELETE'].every(isAllowedMethod)).toBe(true)
    expect(['TRACE', 'CONNECT', 'PROPFIND', 'get', ''].some(isAllowedMethod)).toBe(false)
  })
})
