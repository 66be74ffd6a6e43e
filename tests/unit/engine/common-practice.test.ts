import { describe, expect, it } from 'vitest'
import { calculateBatch } from '#shared/engine/batch'
import { planDay } from '#shared/engine/day-plan'
import { D, sum } from '#shared/engine/decimal'
import { hasPotLife, readMix } from '#shared/engine/mix'
import type { MixInput } from '#shared/engine/mix'
import { parseRatio } from '#shared/engine/ratio'
import { coatWindows, overcoatWindow } from '#shared/engine/window'
import { windowState } from '#shared/engine/window-state'
import { grainUm } from '#shared/reference/grits'

/** Every figure in this file: common practice, no source. */

const MIN = 60_000
const HOUR = 60 * MIN
const at = (minutes: number) => 1_800_000_000_000 + minutes * MIN
const DONE_AT_ONCE = { firstSprayedAt: at(0), lastSprayedAt: at(0) }

const mixOf = (ratio: string, thinnedOnly = false): MixInput => ({
  basis: 'weight',
  components: parseRatio(ratio).map((part, index) => ({
    name: ['base', thinnedOnly ? 'thinner' : 'hardener', 'thinner'][index] ?? 'more',
    ...part,
    role: index === 0 ? 'base' as const : (thinnedOnly || index === 2 ? 'thinner' as const : 'hardener' as const),
  })),
})

/** 10 m² out of the gun: grams are the coat weight times ten, whatever the gun. */
const tenM2 = (ratio: string, filmWeightGsm: string, coats = 1, thinnedOnly = false) => calculateBatch({
  mix: mixOf(ratio, thinnedOnly), areaM2: '10', filmWeightGsm, filmWeightIs: 'sprayed', coats, scaleDivisionG: '0.1',
})

describe('ratios and coat weights, common practice, no source', () => {
  it.each([
    ['a nitro sealer 100:40 at 150 g/m²', '100:40', '150', 1, true, ['1071.4', '428.6'], '1500'],
    ['a polyurethane sealer 100:40:30, two coats of 130 g/m²', '100:40:30', '130', 2, false, ['1529.4', '611.8', '458.8'], '2600'],
    ['a polyurethane sealer 100:50:30, two coats of 130 g/m²', '100:50:30', '130', 2, false, ['1444.4', '722.2', '433.3'], '2599.9'],
    ['an acrylic topcoat 100:30:30 at 100 g/m²', '100:30:30', '100', 1, false, ['625', '187.5', '187.5'], '1000'],
    ['an acrylic topcoat 100:80:40 at 150 g/m²', '100:80:40', '150', 1, false, ['681.8', '545.5', '272.7'], '1500'],
    ['an acrylic topcoat 100:80:30 at 120 g/m²', '100:80:30', '120', 1, false, ['571.4', '457.1', '171.4'], '1199.9'],
    ['an acrylic topcoat 100:10:30 at 120 g/m²', '100:10:30', '120', 1, false, ['857.1', '85.7', '257.1'], '1199.9'],
    ['an acrylic topcoat 100:10:40 at 130 g/m²', '100:10:40', '130', 1, false, ['866.7', '86.7', '346.7'], '1300.1'],
    ['a spray stain 100:600 at 30 g/m²', '100:600', '30', 1, true, ['42.9', '257.1'], '300'],
    ['a glaze 10:300 at 20 g/m²', '10:300', '20', 1, true, ['6.5', '193.5'], '200'],
    ['a textured coat 100:100 at 200 g/m²', '100:100', '200', 1, false, ['1000', '1000'], '2000'],
    ['a crystallising coat at 50 g/m²', '100', '50', 1, false, ['500'], '500'],
    ['a mirror-effect coat at 30 g/m²', '100', '30', 1, false, ['300'], '300'],
  ] as const)('%s', (_, ratio, gsm, coats, thinnedOnly, grams, total) => {
    const { components, targetTotalG } = tenM2(ratio, gsm, coats, thinnedOnly)
    expect(components.map(({ targetG }) => targetG)).toEqual(grams)
    expect(targetTotalG).toBe(total)
  })

  it('a sealer or stain that is only thinned has no pot life, one with hardener has', () => {
    expect(hasPotLife(readMix(mixOf('100:40', true)))).toBe(false)
    expect(hasPotLife(readMix(mixOf('100:600', true)))).toBe(false)
    expect(hasPotLife(readMix(mixOf('100:10:30')))).toBe(true)
  })

  it('a stain\'s base may be a seventh and a glaze\'s a thirty-first of the mix', () => {
    expect(tenM2('100:600', '30', 1, true).components[0]?.sharePct).toBe('14.285714285714')
    expect(tenM2('10:300', '10', 1, true).components[0]?.sharePct).toBe('3.225806451613')
  })

  it('a glaze for 10 m² is too small for a 1 g scale, and the engine says how much is not', () => {
    const glaze = (scaleDivisionG: string) => calculateBatch({
      mix: mixOf('10:300', true), areaM2: '10', filmWeightGsm: '10', filmWeightIs: 'sprayed', scaleDivisionG,
    })
    expect(glaze('1')).toMatchObject({ tooSmallForScale: true, smallestTotalG: '760' })
    expect(glaze('0.1')).toMatchObject({ tooSmallForScale: false })
  })

  it('a crackle glaze of 100 g/m² in total over two passes is two coats of 50, not two of 100', () => {
    expect(tenM2('100', '50', 2).exactTotalG).toBe('1000')
    expect(tenM2('100', '100', 2).exactTotalG).toBe('2000')
  })

  it('two coats of sealer sum from their two single batches', () => {
    const one = tenM2('100:40:30', '130', 1)
    expect(sum([one.exactTotalG, one.exactTotalG].map(grams => new D(grams))).toString()).toBe(tenM2('100:40:30', '130', 2).exactTotalG)
  })
})

describe('windows, common practice, no source', () => {
  const state = (minMs: number, maxMs: number | null, minute: number) =>
    windowState(overcoatWindow({ ...DONE_AT_ONCE, minMs, maxMs }), at(minute))

  it('a second sealer coat 2 to 4 h after the first, then 12 h until it is sanded', () => {
    expect([119, 120, 239, 240].map(minute => state(2 * HOUR, 4 * HOUR, minute))).toEqual(['too-early', 'open', 'closing', 'missed'])
    const sanded = coatWindows(DONE_AT_ONCE,
      { overcoatMinMs: 2 * HOUR, overcoatMaxMs: 4 * HOUR, sandMinMs: 12 * HOUR, sandedMaxMs: null },
      { firstSprayedAt: at(12 * 60), lastSprayedAt: at(12 * 60 + 40) })
    expect(sanded).toMatchObject({ sandFromAt: at(720), sandedTooEarly: false, overcoat: { opensAt: at(760), closesAt: null } })
  })

  it('a second wet coat after 3 to 5 min has a window that closes from its middle on', () => {
    const wet = overcoatWindow({ ...DONE_AT_ONCE, minMs: 3 * MIN, maxMs: 5 * MIN })
    expect(wet).toEqual({ opensAt: at(3), closingAt: at(4), closesAt: at(5), empty: false })
  })

  it('and none at all on a rack that takes 3 min to spray', () => {
    const rack = { firstSprayedAt: at(0), lastSprayedAt: at(3) }
    expect(overcoatWindow({ ...rack, minMs: 3 * MIN, maxMs: 5 * MIN }).empty).toBe(true)
  })

  it('a waterborne sealer is overcoated at 35 min when only dust-free, its sibling after 4 h', () => {
    expect([state(35 * MIN, null, 35), state(4 * HOUR, null, 35), state(4 * HOUR, null, 240)]).toEqual(['open', 'too-early', 'open'])
  })

  it('a crystallising coat lies flat for 12 h; a mirror-effect coat goes on gloss 12 h old and is overcoated after 6 h', () => {
    expect(state(12 * HOUR, null, 719)).toBe('too-early')
    expect(state(6 * HOUR, null, 360)).toBe('open')
    const twoDays = [0, 1, 2].map(number => ({ from: at(number * 1440), to: at(number * 1440 + 540) }))
    const { starts } = planDay({
      steps: [
        { name: 'gloss', workMs: 30 * MIN, minMs: 0, maxMs: null },
        { name: 'mirror effect', workMs: 30 * MIN, minMs: 12 * HOUR, maxMs: null },
        { name: 'clear', workMs: 30 * MIN, minMs: 6 * HOUR, maxMs: null },
      ],
      workingIntervals: twoDays, from: at(0),
    })
    expect(starts?.map(({ startsAt }) => startsAt)).toEqual([at(510), at(1440), at(1830)])
  })

  it.each([8, 12, 24])('final drying of %i h ends when it says', (hours) => {
    expect(state(hours * HOUR, null, hours * 60 - 1)).toBe('too-early')
    expect(state(hours * HOUR, null, hours * 60)).toBe('open')
  })
})

describe('grits, common practice, no source', () => {
  it('bare wood and MDF at P150, sealer at P320, glazes at P600: ever finer', () => {
    const grains = ['P150', 'P320', 'P600'].map(grade => new D(grainUm(grade)!))
    expect(grains[0]!.gt(grains[1]!) && grains[1]!.gt(grains[2]!)).toBe(true)
  })

  it('P380 is a shop\'s word and no grade of the standard', () => {
    expect(grainUm('P380')).toBeNull()
  })
})
