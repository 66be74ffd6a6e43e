import { describe, expect, it } from 'vitest'
import { cupBands, cupGeometry, cupTicks, spreadLabels } from '~/utils/draw-cup'

const cup = cupGeometry({ width: 330, height: 440, left: 62, right: 100, note: true })

describe('cupGeometry', () => {
  it('rises with every gram and stays inside the wall', () => {
    const heights = Array.from({ length: 21 }, (_, place) => cup.yAt(place / 20))
    for (const [place, y] of heights.entries()) {
      if (place > 0) expect(y).toBeLessThan(heights[place - 1] ?? 0)
      expect(y).toBeGreaterThan(cup.top)
      expect(y).toBeLessThan(cup.bottom)
    }
  })

  it('closes the graduations up towards the rim, because a higher ring holds more', () => {
    const steps = Array.from({ length: 10 }, (_, place) => cup.yAt(place / 10) - cup.yAt((place + 1) / 10))
    for (const [place, step] of steps.entries()) if (place > 0) expect(step).toBeLessThan(steps[place - 1] ?? 0)
  })

  it('spaces them by true volume: equal shares hold equal volumes of the tapered cup', () => {
    const inside = (y: number): number => cup.halfAt(y) - 7
    const volume = (from: number, to: number): number => inside(to) ** 3 - inside(from) ** 3
    const whole = volume(cup.yAt(0), cup.yAt(1))
    for (let place = 0; place < 8; place += 1) {
      expect(volume(cup.yAt(place / 8), cup.yAt((place + 1) / 8)) / whole).toBeCloseTo(1 / 8, 6)
    }
  })

  it('draws an overfull cup at its brim, not beyond', () => expect(cup.yAt(3)).toBe(cup.yAt(1.04)))
})

describe('cupTicks', () => {
  it.each([[2000, 384, 250], [2000, 234, 500], [1500, 240, 500], [400, 204, 100]])('a cup of %i g, %i px tall, is numbered every %i g', (capacity, height, major) => {
    const majors = cupTicks(capacity, height).ticks.filter(tick => tick.major).map(tick => tick.at)
    expect(majors[0]).toBe(0)
    expect(majors[1]).toBe(major)
  })
})

describe('cupBands', () => {
  const layers = [{ pouredG: 877.1, targetG: 876.5 }, { pouredG: 212, targetG: 438.6 }, { pouredG: 0, targetG: 175.4 }]

  it('stacks what is poured, being poured and still to come', () => {
    const bands = cupBands(layers, 1, false)
    expect(bands.map(band => band.state)).toEqual(['poured', 'active', 'to-come'])
    expect(bands[0]).toMatchObject({ fromG: 0, filledG: 877.1, toG: 877.1 })
    expect(bands[1]?.indexG).toBeCloseTo(1315.7)
    expect(bands[2]?.fromG).toBeCloseTo(1315.7)
    expect(bands[2]?.filledG).toBeCloseTo(1315.7)
  })

  it('lets an overpoured layer push up what comes after it, while its index stays at the target', () => {
    const bands = cupBands([layers[0] ?? { pouredG: 0, targetG: 0 }, { pouredG: 460.5, targetG: 438.6 }, { pouredG: 0, targetG: 175.4 }], 1, false)
    expect(bands[1]?.toG).toBeCloseTo(1337.6)
    expect(bands[1]?.indexG).toBeCloseTo(1315.7)
    expect(bands[2]?.fromG).toBeCloseTo(1337.6)
  })

  it('shows only what is in the cup once it is sealed', () => {
    const bands = cupBands([{ pouredG: 800, targetG: 876 }, { pouredG: 0, targetG: 438 }], undefined, true)
    expect(bands.map(band => band.toG)).toEqual([800, 800])
  })
})

describe('spreadLabels', () => {
  it.each([
    [[300, 290, 280], 40, 20], [[30, 25, 22], 40, 20], [[100, 300, 200], 40, 20], [[50, 50], 44, 34],
  ])('%j keep %i px apart and under the rim', (wanted, gap, least) => {
    const placed = [...spreadLabels(wanted, gap, least)].sort((a, b) => a - b)
    expect(placed[0]).toBeGreaterThanOrEqual(least)
    for (const [place, y] of placed.entries()) if (place > 0) expect(y - (placed[place - 1] ?? 0)).toBeGreaterThanOrEqual(gap)
  })

  it('leaves labels that do not touch where they are, in their order', () => expect(spreadLabels([300, 100, 200], 40, 20)).toEqual([300, 100, 200]))
})
