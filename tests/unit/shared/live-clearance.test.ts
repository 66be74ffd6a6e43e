import { describe, expect, it } from 'vitest'
import type { LiveBooth } from '#shared/schemas/live'
import { keepOut } from '#shared/utils/live-clearance'

const at = (minute: number) => new Date(Date.parse('2026-11-17T09:00:00.000Z') + minute * 60_000).toISOString()
const now = Date.parse(at(0))
const booth = (clearance: LiveBooth['clearance'], extraction: LiveBooth['extraction'] = 'running') => ({ clearance, extraction })
const isocyanates = [{ containsIsocyanates: true }]

describe('who may enter a booth', () => {
  it('is everybody where nothing speaks against it', () => {
    expect(keepOut(booth(null), [{ containsIsocyanates: false }], now)).toBeNull()
  })

  it('is told before the first shot, without a count', () => {
    expect(keepOut(booth(null), isocyanates, now)).toMatchObject({ state: 'ahead', leftMs: null, alarm: false })
  })

  it('is nobody without mask while it is sprayed, and no time is counted', () => {
    const spraying = { state: 'spraying', since: at(-10), lastShotAt: null, clearAt: null } as const
    expect(keepOut(booth(spraying), isocyanates, now)).toMatchObject({ state: 'spraying', leftMs: null, alarm: false, since: at(-10) })
    expect(keepOut(booth(spraying, 'off'), isocyanates, now)).toMatchObject({ alarm: true })
    expect(keepOut(booth(spraying, 'unknown'), isocyanates, now)).toMatchObject({ alarm: true })
  })

  it('is counted from the last shot, and ends by the instant even when the server has not said so', () => {
    const counting = { state: 'counting', since: null, lastShotAt: at(-8), clearAt: at(22) } as const
    expect(keepOut(booth(counting), [], now)).toMatchObject({ state: 'counting', leftMs: 22 * 60_000 })
    expect(keepOut(booth(counting), [], Date.parse(at(22)))).toBeNull()
  })

  it('alarms while the count rests', () => {
    const stopped = { state: 'stopped', since: null, lastShotAt: at(-8), clearAt: null } as const
    expect(keepOut(booth(stopped, 'off'), [], now)).toMatchObject({ state: 'stopped', leftMs: null, alarm: true })
  })
})
