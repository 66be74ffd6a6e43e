import { describe, expect, it } from 'vitest'
import { toleranceRange } from '~/utils/draw-ruler'
import { niceStep, stepDecimals, ticksBetween } from '~/utils/draw-scale'

describe('toleranceRange', () => {
  const [low, high] = [425.4, 451.8]

  it.each([[0], [140], [380], [396.4], [425.4], [438], [451.8], [460.5], [700]])('shows the band and a reading of %d g', (reading) => {
    const range = toleranceRange(low, high, reading, 548)
    expect(range.min).toBeLessThanOrEqual(Math.min(low, reading))
    expect(range.max).toBeGreaterThan(Math.max(high, reading))
    expect(range.ticks.filter(tick => tick.major).length).toBeGreaterThanOrEqual(2)
  })

  it('zooms to one and a half bands inside the band', () => {
    const range = toleranceRange(low, high, 438, 548)
    expect(range.max - range.min).toBeCloseTo(1.5 * (high - low))
  })

  it('starts at zero while the pour is far from the band', () => expect(toleranceRange(low, high, 140, 548).min).toBe(0))

  it('numbers every 10 g in the last stretch', () => {
    const majors = toleranceRange(low, high, 396.4, 548).ticks.filter(tick => tick.major)
    expect(majors.map(tick => tick.at)).toEqual([380, 390, 400, 410, 420, 430, 440, 450, 460])
  })
})

describe('niceStep', () => {
  it.each([[90, 9, 10], [2000, 8, 250], [2000, 5, 500], [0.9, 9, 0.1], [37, 6, 10], [1, 1, 1]])('cuts %d into at most %i parts by %d', (span, most, step) => {
    expect(niceStep(span, most)).toBeCloseTo(step, 9)
  })
})

describe('stepDecimals', () => {
  it.each([[10, 0], [0.5, 1], [0.25, 2], [0.1, 1], [2.5, 1], [250, 0]])('a step of %d needs %i', (step, decimals) => {
    expect(stepDecimals(step)).toBe(decimals)
  })
})

describe('ticksBetween', () => {
  it('keeps both ends and does not drift', () => {
    const ticks = ticksBetween(0, 0.3, 0.1, 0.1)
    expect(ticks).toHaveLength(4)
    expect(ticksBetween(0, 1, 0.1, 0.5).filter(tick => tick.major).map(tick => tick.at)).toEqual([0, 0.5, 1])
  })
})
