import { describe, expect, it } from 'vitest'
import { untilNextStroke } from '~/utils/bell'

describe('the bell of a pot whose life is up', () => {
  it.each([
    [0, 4_000],
    [1_500, 2_500],
    [3_999, 1],
    [4_000, 4_000],
    [59_999, 1],
  ])('strikes every 4 s in the first minute: %i ms in, the next in %i ms', (since, next) => {
    expect(untilNextStroke(since)).toBe(next)
  })

  it.each([
    [60_000, 30_000],
    [75_000, 15_000],
    [89_999, 1],
    [600_000, 30_000],
  ])('strikes every 30 s after that: %i ms in, the next in %i ms', (since, next) => {
    expect(untilNextStroke(since)).toBe(next)
  })

  it('strikes 15 times in the first minute and twice in each later one', () => {
    const strokes = [0]
    while (strokes.at(-1)! < 180_000) strokes.push(strokes.at(-1)! + untilNextStroke(strokes.at(-1)!))
    expect(strokes.filter((at) => at < 60_000)).toHaveLength(15)
    expect(strokes.filter((at) => at >= 60_000 && at < 120_000)).toHaveLength(2)
  })
})
