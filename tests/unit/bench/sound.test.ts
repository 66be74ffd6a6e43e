import { describe, expect, it } from 'vitest'
import { heardOf, soundOf } from '#shared/utils/bench-sound'

type Heard = Parameters<typeof soundOf>[1]
const scale = (verdict: Heard['verdict'], more: Partial<Heard> = {}): Heard => ({ verdict, steady: false, typed: false, baseLeads: false, ...more })

/** What is heard while readings come one after the other. */
function listen(readings: readonly Heard[]): (string | null)[] {
  let before: Heard['verdict'] = null
  return readings.map((reading) => {
    const sound = soundOf(before, reading)
    before = heardOf(before, reading)
    return sound
  })
}

describe('what is heard while pouring', () => {
  it('is one tick on entering the tolerance and two low strokes once it is too much', () => {
    expect(listen([scale('short'), scale('in-tolerance'), scale('in-tolerance'), scale('too-much'), scale('too-much'), scale('in-tolerance')]))
      .toEqual([null, 'tick', null, 'low', null, 'tick'])
  })

  it('of a typed figure is heard once it stands, not at each digit', () => {
    const typed = (verdict: Heard['verdict'], steady: boolean): Heard => scale(verdict, { typed: true, steady })
    expect(listen([typed('short', false), typed('in-tolerance', false), typed('too-much', false), typed('too-much', true)])).toEqual([null, null, null, 'low'])
    expect(listen([typed('in-tolerance', false), typed('in-tolerance', true)])).toEqual([null, 'tick'])
  })

  it('is nothing where the others follow the base, or the scale cannot tell', () => {
    expect(listen([scale('too-much', { baseLeads: true }), scale('cannot-tell')])).toEqual([null, null])
  })
})
