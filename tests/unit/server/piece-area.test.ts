import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { D } from '../../../shared/engine/decimal'
import { pieceAreaM2, pieceAreaWorking } from '../../../server/services/piece-area'

const piece = { lengthMm: '715', widthMm: '597', thicknessMm: '19', quantity: 1, faces: 'both' as const }

describe('pieceAreaM2', () => {
  // 715 × 597 = 426 855 mm²; 2 × (715 + 597) × 19 = 49 856 mm². Worked by hand.
  it.each([
    ['front', 1, '0.426855'],
    ['back', 1, '0.426855'],
    ['both', 1, '0.85371'],
    ['edges', 1, '0.049856'],
    ['all', 1, '0.903566'],
    ['all', 12, '10.842792'],
  ] as const)('%s, %i pieces: %s m²', (faces, quantity, area) => {
    expect(pieceAreaM2({ ...piece, faces, quantity })).toBe(area)
  })

  it('counts edges of unknown thickness as nothing', () => {
    expect(pieceAreaM2({ ...piece, faces: 'all', thicknessMm: null })).toBe('0.85371')
  })

  it('rounds once, at a square millimetre', () => {
    expect(pieceAreaM2({ ...piece, lengthMm: '0.5', widthMm: '0.5', faces: 'front', quantity: 3 })).toBe('0.000001')
  })

  it('grows with the quantity without a rounding of its own', () => {
    const sizes = fc.integer({ min: 1, max: 6000 }).map(String)
    fc.assert(fc.property(sizes, sizes, fc.integer({ min: 1, max: 500 }), (lengthMm, widthMm, quantity) => {
      const one = new D(pieceAreaM2({ ...piece, lengthMm, widthMm, quantity: 1 }))
      expect(pieceAreaM2({ ...piece, lengthMm, widthMm, quantity })).toBe(one.times(quantity).toString())
    }))
  })
})

describe('pieceAreaWorking', () => {
  it('ends with the stored area', () => {
    const lines = pieceAreaWorking({ ...piece, quantity: 12, faces: 'all', areaM2: '10.842792' })
    expect(lines.map(line => line.value)).toEqual(['0.903566', '10.842792'])
    expect(lines[0]?.formula).toBe('715 × 597 × 2 faces + 2 × (715 + 597) × 19 edges mm²')
  })

  it('says when another area was entered', () => {
    const lines = pieceAreaWorking({ ...piece, areaM2: '0.9' })
    expect(lines.at(-1)).toEqual({ what: 'area in force', formula: 'entered by hand', value: '0.9', unit: 'm²' })
  })
})
