import { describe, expect, it } from 'vitest'
import type { LiveWindow } from '#shared/schemas/live'
import { needsFreshMix, windowAt } from '#shared/utils/live-windows'

const start = Date.parse('2026-11-17T09:00:00.000Z')
const minute = 60_000
const iso = (minutes: number) => new Date(start + minutes * minute).toISOString()
const window = (more: Partial<LiveWindow> = {}): LiveWindow => ({
  id: 'w', jobId: 'j', jobCode: 'J-1', jobTitle: 'Fronts', jobStepId: 's', stepTitle: 'Sealer', pieces: ['1'], boothId: null, boothName: null,
  firstAt: iso(0), lastAt: iso(20), opensAt: iso(80), closingAt: iso(220), closesAt: iso(240), state: 'too-early', assumed: false, unended: null, ...more,
})

describe('a window whose coat is done', () => {
  it('stands where it is', () => {
    const at = windowAt(window(), start + 100 * minute)
    expect(at).toMatchObject({ opensAt: start + 80 * minute, closesAt: start + 240 * minute, lastAt: start + 20 * minute, state: 'open', empty: false })
  })
})

describe('a window whose last spray nobody noted', () => {
  const unended = window({ assumed: true, unended: { minMs: 60 * minute, maxMs: 240 * minute } })

  it('opens ever later, and closes by the first shot', () => {
    for (const now of [30, 90, 170]) {
      expect(windowAt(unended, start + now * minute)).toMatchObject({
        lastAt: start + now * minute, opensAt: start + (now + 60) * minute, closesAt: start + 240 * minute, state: 'too-early',
      })
    }
  })

  it('says when it would close before it opens', () => {
    expect(windowAt(unended, start + 185 * minute)).toMatchObject({ empty: true, closingAt: null, state: 'too-early' })
    expect(windowAt(unended, start + 240 * minute).state).toBe('missed')
  })
})

describe('what is mixed for a window', () => {
  it('has to last until it opens', () => {
    const opensAt = start + 80 * minute
    expect(needsFreshMix(opensAt, [iso(79), null])).toBe(true)
    expect(needsFreshMix(opensAt, [iso(79), iso(81)])).toBe(false)
    expect(needsFreshMix(opensAt, [])).toBe(true)
  })
})
