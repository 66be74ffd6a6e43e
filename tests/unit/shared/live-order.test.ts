import { describe, expect, it } from 'vitest'
import type { LivePot, LiveWindow } from '#shared/schemas/live'
import { compareUrgency, compareWindows } from '#shared/utils/live-order'

const pot = (code: string, state: LivePot['state'], endsAt: string | null) => ({ code, state, endsAt }) as LivePot
const order = (pots: LivePot[]) => [...pots].sort(compareUrgency).map(({ code }) => code)

describe('pots on the wall', () => {
  const pots = [
    pot('B-5', 'no-pot-life', null),
    pot('B-4', 'fresh', '2026-01-01T12:00:00.000Z'),
    pot('B-3', 'fresh', '2026-01-01T11:00:00.000Z'),
    pot('B-2', 'closing', '2026-01-01T13:00:00.000Z'),
    pot('B-1', 'life-up', '2026-01-01T09:00:00.000Z'),
  ]

  it('stand by urgency, then by what ends soonest', () => {
    expect(order(pots)).toEqual(['B-1', 'B-2', 'B-3', 'B-4', 'B-5'])
  })

  it('stand the same whatever order they came in', () => {
    expect(order([...pots].reverse())).toEqual(order(pots))
    expect(order([pot('B-8', 'fresh', '2026-01-01T12:00:00.000Z'), pot('B-7', 'fresh', '2026-01-01T12:00:00.000Z')])).toEqual(['B-7', 'B-8'])
  })
})

describe('windows on the wall', () => {
  const window = (id: string, opens: number, closing: number | null, closes: number | null) => ({
    id,
    opensAt: new Date(opens).toISOString(),
    closingAt: closing === null ? null : new Date(closing).toISOString(),
    closesAt: closes === null ? null : new Date(closes).toISOString(),
  }) as LiveWindow

  it('stand by what has to be done first: closing, open, to come, missed', () => {
    const windows = [window('missed', 0, 10, 20), window('later', 900, 950, 1000), window('soon', 600, 650, 700), window('never', 10, null, null), window('open', 10, 800, 900), window('closing', 10, 400, 600)]
    expect(windows.sort(compareWindows(500)).map(({ id }) => id)).toEqual(['closing', 'open', 'never', 'soon', 'later', 'missed'])
  })
})
