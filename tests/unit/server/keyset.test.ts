import { describe, expect, it } from 'vitest'
import { decodeCursor, encodeCursor, type KeysetKind, type KeysetValues } from '../../../server/utils/keyset'

const id = '7d7f3c1e-4a52-4f6d-9c0b-0a1b2c3d4e5f'

describe('a cursor', () => {
  it('comes back as it went, in letters that need no escaping', () => {
    const values = [1_763_362_800_000, id, 'Ä/+?&']
    const cursor = encodeCursor(values)
    expect(cursor).toMatch(/^[\w-]+$/)
    expect(decodeCursor(cursor, ['instant', 'id', 'string'])).toEqual(values)
  })

  it.each<[string, KeysetValues, KeysetKind[]]>([
    ['too few values', [1], ['instant', 'id']],
    ['too many values', [1, id], ['instant']],
    ['a word for a number', ['1'], ['instant']],
    ['a fraction', [1.5], ['instant']],
    ['an instant that no column holds', [9e15], ['instant']],
    ['an instant before 1970', [-1], ['instant']],
    ['an id that is none', ['\' OR 1 = 1'], ['id']],
    ['a number for a word', [1], ['string']],
  ])('is refused with %s', (_what, values, shape) => {
    expect(() => decodeCursor(encodeCursor(values), shape)).toThrow(expect.objectContaining({ status: 400, fields: [expect.objectContaining({ path: 'cursor' })] }))
  })

  it.each(['', '!', 'bm9uc2Vuc2U', Buffer.from('{"length":1}').toString('base64url')])('is refused when it is none: %j', (cursor) => {
    expect(() => decodeCursor(cursor, ['instant'])).toThrow(expect.objectContaining({ status: 400 }))
  })
})
