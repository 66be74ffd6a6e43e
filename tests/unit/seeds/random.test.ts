import { describe, expect, it } from 'vitest'
import { randomOf } from '../../../seeds/demo/random'

const draw = (seed: number) => {
  const random = randomOf(seed)
  return Array.from({ length: 200 }, () => random.between(-5, 5))
}

describe('chance', () => {
  it('repeats itself for a seed and differs for another', () => {
    expect(draw(7)).toEqual(draw(7))
    expect(draw(7)).not.toEqual(draw(8))
  })

  it('reaches both ends and nothing beyond', () => {
    const drawn = draw(1)
    expect(Math.min(...drawn)).toBe(-5)
    expect(Math.max(...drawn)).toBe(5)
  })

  it('comes nearer to the middle when asked to', () => {
    const random = randomOf(3)
    const drawn = Array.from({ length: 3000 }, () => random.around(-30, 30))
    const inner = drawn.filter((value) => Math.abs(value) <= 15).length
    expect(inner).toBeGreaterThan(2100)
    expect(drawn.every((value) => Number.isInteger(value) && Math.abs(value) <= 30)).toBe(true)
  })

  it.each([0, -1, 1.5])('refuses to draw below %s', (below) => expect(() => randomOf(1).below(below)).toThrow(RangeError))
})
