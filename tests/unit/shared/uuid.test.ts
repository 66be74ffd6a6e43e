import { afterEach, describe, expect, it, vi } from 'vitest'
import { newUuid } from '#shared/utils/uuid'

afterEach(() => vi.unstubAllGlobals())

describe('a random UUID', () => {
  const version4 = /^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/

  it('is version 4 where the browser makes it', () => {
    expect(newUuid()).toMatch(version4)
  })

  it('is version 4 and unlike any other on a plain-http network, where the browser does not', () => {
    const { crypto } = globalThis
    vi.stubGlobal('crypto', { getRandomValues: crypto.getRandomValues.bind(crypto) })
    const made = Array.from({ length: 500 }, newUuid)
    expect(made.every((id) => version4.test(id))).toBe(true)
    expect(new Set(made).size).toBe(500)
  })
})
