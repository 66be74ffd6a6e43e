import { describe, expect, it } from 'vitest'
import { blanksToNull, changedFields, conflictsOf } from '~/utils/form-conflict'

const start = { name: 'Sealer', price: '10', hazards: ['H226'], version: 1 }

describe('conflictsOf', () => {
  it('finds nothing where somebody else changed nothing that the form holds', () => {
    expect(conflictsOf(start, { ...start, name: 'Sealer, white' }, { ...start, version: 4 })).toEqual([])
  })

  it('finds nothing where both wrote the same', () => {
    expect(conflictsOf(start, { ...start, price: '11' }, { ...start, price: '11', version: 2 })).toEqual([])
  })

  it('names a field that both changed, with both values', () => {
    expect(conflictsOf(start, { ...start, price: '11' }, { ...start, price: '12', version: 2 }))
      .toEqual([{ path: 'price', mine: '11', theirs: '12', untouched: false }])
  })

  it('names a field that only they changed and says so', () => {
    expect(conflictsOf(start, { ...start, name: 'Sealer, white' }, { ...start, hazards: ['H226', 'H317'], version: 2 }))
      .toEqual([{ path: 'hazards', mine: ['H226'], theirs: ['H226', 'H317'], untouched: true }])
  })
})

describe('changedFields', () => {
  it('leaves the version out', () => {
    expect(changedFields(start, { ...start, version: 9, price: '11' })).toEqual(['price'])
  })
})

describe('blanksToNull', () => {
  it('turns empty text into nothing given, at any depth, and leaves the rest', () => {
    expect(blanksToNull({ a: '', b: '0', c: [{ d: '', e: false }], f: { g: '' }, h: null })).toEqual({ a: null, b: '0', c: [{ d: null, e: false }], f: { g: null }, h: null })
  })
})
