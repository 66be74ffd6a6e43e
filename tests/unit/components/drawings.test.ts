// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import CupDrawing from '~/components/cup/CupDrawing.vue'
import CupFill from '~/components/cup/CupFill.vue'
import CupToleranceRuler from '~/components/cup/CupToleranceRuler.vue'
import TimeCount from '~/components/time/TimeCount.vue'
import TimeLifeBar from '~/components/time/TimeLifeBar.vue'
import TimeWindowBar from '~/components/time/TimeWindowBar.vue'

const MIN = 60_000
const ZONE = 'Europe/Berlin'
const START = Date.UTC(2026, 10, 17, 7, 0)

describe('CupDrawing', () => {
  const layers = [
    { role: 'base' as const, label: 'Clear sealer', code: 'CS-110', targetG: '771.6', pouredG: '771.9' },
    { role: 'hardener' as const, label: 'Hardener', code: 'CH-31', targetG: '386.0', pouredG: '212.4' },
    { role: 'thinner' as const, label: 'Thinner', code: 'CT-4', targetG: '154.4', pouredG: '0' },
  ]

  it('tells in words what is in the cup and what is to come', () => {
    const wrapper = mount(CupDrawing, { props: { capacityG: '2000', layers, active: 1 } })
    expect(wrapper.attributes('aria-label')).toBe('Mixing cup, 2\u2009000 g: Clear sealer 771.9 g of 771.6 g, Hardener 212.4 g of 386.0 g, Thinner 0.0 g of 154.4 g')
  })

  it('labels what was poured by its grams and the rest by their targets', () => {
    const texts = mount(CupDrawing, { props: { capacityG: '2000', layers, active: 1 } }).findAll('text').map(text => text.text())
    expect(texts).toEqual(expect.arrayContaining(['771.9', '386.0', '154.4', 'CS-110', 'CH-31', 'CT-4']))
    expect(texts).not.toContain('771.6')
  })

  it('draws what is still to come at a third of the strength, and nothing of it once sealed', () => {
    const ghosts = (sealed: boolean): number => mount(CupDrawing, { props: { capacityG: '2000', layers, active: sealed ? undefined : 1, sealed } }).findAll('rect[opacity=".34"]').length
    expect(ghosts(false)).toBe(2)
    expect(ghosts(true)).toBe(0)
  })

  it('gives two cups on a page patterns of their own', () => {
    const ids = mount({ components: { CupDrawing }, setup: () => ({ layers }), template: '<div><CupDrawing capacity-g="2000" :layers="layers" /><CupDrawing capacity-g="2000" :layers="layers" /></div>' })
      .findAll('pattern').map(pattern => pattern.attributes('id'))
    expect(new Set(ids).size).toBe(8)
  })

  it('takes a cup with nothing in it', () => {
    expect(mount(CupDrawing, { props: { capacityG: '600', layers: [] } }).attributes('aria-label')).toBe('Mixing cup, 600 g: empty')
  })
})

describe('CupFill', () => {
  it.each([[0.5, 'Lot left 50 per cent'], [1.4, 'Lot left 100 per cent'], [-1, 'Lot left 0 per cent']])('a share of %d reads %s', (share, label) => {
    expect(mount(CupFill, { props: { share, label: 'Lot left' } }).attributes('aria-label')).toBe(label)
  })
})

describe('CupToleranceRuler', () => {
  const ruler = (readingG: string): ReturnType<typeof mount> => mount(CupToleranceRuler, { props: { targetG: '386.0', lowG: '374.4', highG: '397.6', readingG, bandLabel: 'stop here' } })
  const indexX = (readingG: string): number => Number(/translateX\(([\d.]+)px\)/.exec(ruler(readingG).get('.glide-index').attributes('style') ?? '')?.[1])

  it('says reading, target and band in words', () => {
    expect(ruler('360').get('svg').attributes('aria-label')).toBe('360.0 g on the scale, target 386.0 g, stop between 374.4 and 397.6 g')
  })

  it('moves its index to the right as the pour goes on', () => {
    expect(indexX('345')).toBeLessThan(indexX('360'))
    expect(indexX('376')).toBeLessThan(indexX('396'))
  })

  it('takes the label away where the index would stand on it', () => {
    expect(ruler('345').text()).toContain('stop here')
    expect(ruler('386').text()).not.toContain('stop here')
  })
})

describe('TimeCount', () => {
  it.each([[7_560_000, '2 h 06'], [18 * MIN, '18 min'], [-570_000, '+9 min']])('%i ms reads %s', (ms, text) => {
    const wrapper = mount(TimeCount, { props: { ms } })
    expect(wrapper.attributes('role')).toBe('timer')
    expect(wrapper.get('.sr-only').text()).toBe(text)
    expect(wrapper.get('[aria-hidden]').text().replace(/\s/g, '')).toBe(text.replace(/\s/g, ''))
  })

  it('sets unit letters smaller than figures', () => {
    expect(mount(TimeCount, { props: { ms: 7_560_000 } }).findAll('i').map(unit => unit.text())).toEqual(['h'])
  })
})

describe('TimeLifeBar', () => {
  const bar = (nowMin: number, endMin = 240): ReturnType<typeof mount> => mount(TimeLifeBar, {
    props: { startsAt: START, lateAt: START + endMin * 0.75 * MIN, endsAt: START + endMin * MIN, now: START + nowMin * MIN, zone: ZONE },
  })

  it('says what is left, or how long it has been up', () => {
    expect(bar(114).get('svg').attributes('aria-label')).toBe('Pot life 4 h, ends 12:00, 2 h 06 left')
    expect(bar(249).get('svg').attributes('aria-label')).toBe('Pot life 4 h, ends 12:00, up since +9 min')
  })

  it('counts on its ruler what is left', () => {
    expect(bar(10).findAll('text').map(text => text.text())).toEqual(['1 h', '2 h', '3 h', '08:00', '12:00'])
  })

  it('names the day where the end is not today', () => {
    expect(bar(1140, 5760).findAll('text').map(text => text.text()).slice(-2)).toEqual(['Tue', 'Sat 08:00'])
  })

  it('has no tape without a late limit', () => {
    const wrapper = mount(TimeLifeBar, { props: { startsAt: START, lateAt: null, endsAt: START + 3 * MIN, now: START, zone: ZONE } })
    expect(wrapper.findAll('rect').filter(rect => rect.attributes('fill')?.startsWith('url(') && rect.attributes('fill')?.includes('-tape'))).toHaveLength(0)
  })
})

describe('TimeWindowBar', () => {
  const bar = (props: { closesAt: number | null, now?: number, planned?: boolean }): ReturnType<typeof mount> => mount(TimeWindowBar, {
    props: { opensAt: START + 110 * MIN, coatFrom: START, coatTo: START + 24 * MIN, zone: ZONE, ...props },
  })

  it('says when it opens and closes', () => {
    expect(bar({ closesAt: START + 480 * MIN }).get('svg').attributes('aria-label')).toBe('Overcoat window: opens 09:50, closes 16:00')
    expect(bar({ closesAt: null, planned: true }).get('svg').attributes('aria-label')).toBe('Overcoat window, planned: opens 09:50, never closes')
  })

  it('sets both times and the index only where there is a now', () => {
    expect(bar({ closesAt: START + 480 * MIN }).findAll('text').map(text => text.text())).toEqual(['09:50', '16:00'])
    expect(bar({ closesAt: START + 480 * MIN }).find('.ease-index').exists()).toBe(false)
    expect(bar({ closesAt: START + 480 * MIN, now: START + 200 * MIN }).find('.ease-index').exists()).toBe(true)
  })
})
