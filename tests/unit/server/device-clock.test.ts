import { describe, expect, it } from 'vitest'
import { correctedReactiveAt, notAfter } from '../../../server/services/device-clock'

const now = Date.parse('2026-11-17T07:00:00.000Z')
const iso = (ms: number) => new Date(ms).toISOString()
const minute = 60_000
const day = 86_400_000

describe('the moment at which a cup becomes reactive', () => {
  it('is what the body says where the tablet says nothing', () => {
    expect(correctedReactiveAt({ reactiveAt: iso(now - minute), device: null }, now)).toEqual({ at: now - minute, note: null })
    const silent = { reactiveAt: null, sentAt: iso(now), offsetMs: 0 }
    expect(correctedReactiveAt({ reactiveAt: iso(now - minute), device: silent }, now)).toEqual({ at: now - minute, note: null })
    expect(correctedReactiveAt({ reactiveAt: null, device: null }, now)).toBeNull()
  })

  it.each([
    ['a day behind', -day], ['an hour behind', -60 * minute], ['right', 0], ['50 s ahead', 50_000], ['a day ahead', day],
  ])('is found by the measured offset of a clock that is %s', (_how, error) => {
    const device = { reactiveAt: iso(now - minute + error), sentAt: iso(now + error), offsetMs: -error }
    expect(correctedReactiveAt({ reactiveAt: null, device }, now)).toEqual({ at: now - minute, note: null })
    expect(correctedReactiveAt({ reactiveAt: null, device: { ...device, offsetMs: null } }, now)).toEqual({ at: now - minute, note: null })
  })

  it.each([
    ['now', 0, 0, null],
    ['a millisecond ahead', 1, 0, 'clock-ahead'],
    ['two minutes ahead', 2 * minute, 0, 'clock-ahead'],
    ['more than two minutes ahead', 2 * minute + 1, 0, 'clock-far-ahead'],
    ['seven days old', -7 * day, -7 * day, null],
    ['older than seven days', -7 * day - 1, -7 * day - 1, 'late-entry'],
  ])('is noted when it is %s', (_how, off, expected, note) => {
    expect(correctedReactiveAt({ reactiveAt: iso(now + off), device: null }, now)).toEqual({ at: now + expected, note })
  })

  it('is never before 1970, whatever a tablet says', () => {
    const device = { reactiveAt: iso(0), sentAt: iso(day), offsetMs: null }
    expect(correctedReactiveAt({ reactiveAt: null, device: { ...device, offsetMs: -day } }, now)).toEqual({ at: 0, note: 'late-entry' })
    expect(correctedReactiveAt({ reactiveAt: null, device }, now)).toEqual({ at: now - day, note: null })
  })
})

describe('an instant that a client gave', () => {
  it('is kept up to now', () => {
    expect(notAfter(iso(now - 1), now)).toBe(now - 1)
    expect(notAfter(iso(now + 1), now)).toBe(now)
  })
})
