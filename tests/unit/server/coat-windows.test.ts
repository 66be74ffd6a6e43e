import { describe, expect, it } from 'vitest'
import { windowAfter } from '../../../server/services/coat-windows'

const minute = 60_000
const [first, last] = [1_000 * minute, 1_020 * minute]
const step = {
  coats: 2, coatIntervalMinMin: '60', coatIntervalMaxMin: '240', overcoatFromMin: '720', overcoatUntilMin: null, sandFromMin: '600', sandUntilMin: null,
}
type Step = Parameters<typeof windowAfter>[0]
const after = (more: Partial<Step>, coat: number) => windowAfter({ ...step, ...more }, coat, first, last)

describe('the window after a coat', () => {
  it('leads to the next coat while there are some to come: opens by the last spray, closes by the first', () => {
    expect(after({}, 1)).toMatchObject({
      purpose: 'coat-interval',
      window: { opensAt: last + 60 * minute, closesAt: first + 240 * minute, closingAt: first + 224 * minute, empty: false },
    })
  })

  it('leads to the overcoat after the last coat, and where no interval is given', () => {
    expect(after({}, 2)).toMatchObject({ purpose: 'overcoat', window: { opensAt: last + 720 * minute, closesAt: null } })
    expect(after({ coatIntervalMinMin: null }, 1)).toMatchObject({ purpose: 'overcoat' })
  })

  it('leads to sanding where nothing else has a time', () => {
    expect(after({ overcoatFromMin: null }, 2)).toMatchObject({ purpose: 'sand', window: { opensAt: last + 600 * minute } })
  })

  it('is none where the schedule gives no time', () => {
    expect(after({ overcoatFromMin: null, sandFromMin: null }, 2)).toBeNull()
  })

  it('says when it closes before it opens', () => {
    expect(after({ coatIntervalMaxMin: '70' }, 1)).toMatchObject({ window: { empty: true, closingAt: null } })
  })
})
