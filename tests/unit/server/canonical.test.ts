import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canonicalJson, type Canonical } from '../../../server/utils/canonical'

describe('canonical JSON', () => {
  it('sorts keys, leaves undefined out and has no white space', () => {
    expect(canonicalJson({ b: [1, 'x', null], a: { d: true, c: undefined } })).toBe('{"a":{"d":true},"b":[1,"x",null]}')
  })

  it.each([1.5, Number.NaN, Number.POSITIVE_INFINITY, 2 ** 53])('refuses %s: quantities travel as strings', (value) => {
    expect(() => canonicalJson({ value })).toThrow(TypeError)
  })

  const json = fc.letrec<{ value: Canonical }>((tie) => ({
    value: fc.oneof(
      { maxDepth: 4 },
      fc.constant(null), fc.boolean(), fc.maxSafeInteger(), fc.string(),
      fc.array(tie('value'), { maxLength: 4 }),
      fc.dictionary(fc.string(), tie('value'), { maxKeys: 5 }),
    ),
  })).value

  it('reads back as the same value, and is the same whatever the order of the keys was', () => {
    fc.assert(fc.property(json, (value) => {
      const text = canonicalJson(value)
      expect(JSON.parse(text)).toEqual(JSON.parse(JSON.stringify(value)))
      expect(canonicalJson(shuffled(value))).toBe(text)
    }))
  })
})

function shuffled(value: Canonical): Canonical {
  if (Array.isArray(value)) return value.map(shuffled)
  if (value === null || typeof value !== 'object') return value
  const copy: { [key: string]: Canonical } = Object.create(null) as { [key: string]: Canonical }
  for (const key of Object.keys(value).reverse()) copy[key] = shuffled(value[key] ?? null)
  return copy
}
