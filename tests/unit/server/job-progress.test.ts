import { describe, expect, it } from 'vitest'
import { coatsDone, covers, pieceStepState } from '../../../server/services/job-progress'

const coat = (coatNumber: number | null, face: 'front' | 'back' | 'both' | 'edges' | 'all' | null) => ({ coatNumber, face })

describe('covers', () => {
  it.each([
    [[], null, false],
    [[], 'front', false],
    [[null], 'all', true],
    [['front'], 'front', true],
    [['front'], 'both', false],
    [['front', 'back'], 'both', true],
    [['both'], 'front', true],
    [['both'], 'edges', false],
    [['both'], 'all', false],
    [['both', 'edges'], 'all', true],
    [['front', 'back', 'edges'], 'all', true],
    [['all'], 'edges', true],
    [['edges'], null, true],
  ] as const)('%j for %s: %s', (faces, asked, whole) => {
    expect(covers(faces, asked)).toBe(whole)
  })
})

describe('coatsDone', () => {
  it('counts a coat once its faces are all on', () => {
    const asks = { coats: 2, faces: 'both' as const }
    expect(coatsDone([coat(1, 'front')], asks)).toBe(0)
    expect(coatsDone([coat(1, 'front'), coat(1, 'back')], asks)).toBe(1)
    expect(coatsDone([coat(1, 'both'), coat(2, 'both')], asks)).toBe(2)
  })

  it('never counts more than the step asks for', () => {
    expect(coatsDone([coat(1, 'all'), coat(2, 'all'), coat(3, 'all')], { coats: 2, faces: 'all' })).toBe(2)
  })

  it('takes what has no number as the first coat', () => {
    expect(coatsDone([coat(null, null), coat(null, null)], { coats: 2, faces: null })).toBe(1)
  })
})

describe('pieceStepState', () => {
  const asks = { state: 'started' as const, coats: 2, faces: null }

  it('goes from to come over started to done', () => {
    expect(pieceStepState([], asks)).toBe('to-come')
    expect(pieceStepState([coat(1, null)], asks)).toBe('started')
    expect(pieceStepState([coat(1, null), coat(2, null)], asks)).toBe('done')
  })

  it('follows a step that was set as done', () => {
    expect(pieceStepState([], { ...asks, state: 'done' })).toBe('done')
  })
})
