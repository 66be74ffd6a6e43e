import { describe, expect, it } from 'vitest'
import { SimulatedScale, type SimulatedStart } from '#shared/utils/bench-scale-simulated'
import type { ScaleReading } from '#shared/utils/bench-scale'
import { HeldClock } from './clock'

function place(start: Partial<SimulatedStart> = {}): { clock: HeldClock, scale: SimulatedScale, said: ScaleReading[], last: () => ScaleReading | undefined } {
  const clock = new HeldClock()
  const scale = new SimulatedScale(clock, { divisionG: '0.1', capacityG: '6000', inCupG: '0', readingG: '', lifted: false, ...start })
  const said: ScaleReading[] = []
  scale.readings(reading => said.push(reading))
  return { clock, scale, said, last: () => said.at(-1) }
}

describe('the simulated scale', () => {
  it('reads nothing in the tared cup and is steady after a second', async () => {
    const { clock, scale, said } = place()
    await scale.connect()
    expect(said).toEqual([{ grams: '0', steady: false, at: 0 }])
    clock.pass(999)
    expect(said).toHaveLength(1)
    clock.pass(1)
    expect(said[1]).toEqual({ grams: '0', steady: true, at: 1000 })
  })

  it('moves while material runs, swings when it is closed and stands still a second later', async () => {
    const { clock, scale, said } = place()
    await scale.connect()
    scale.open('pour')
    clock.pass(500)
    expect(said.slice(1).map(({ grams, steady }) => [grams, steady])).toEqual(['12.2', '24.2', '36.2', '48.2', '60.2'].map(grams => [grams, false]))
    scale.close()
    clock.pass(300)
    expect(said.slice(6).map(({ grams }) => grams)).toEqual(['60.1', '59.9', '60'])
    clock.pass(1000)
    expect(said.at(-1)).toEqual({ grams: '60', steady: true, at: 1800 })
  })

  it('says the same for the same acts', async () => {
    const run = async (): Promise<ScaleReading[]> => {
      const { clock, scale, said } = place()
      await scale.connect()
      scale.open('pour')
      clock.pass(1230)
      scale.open('thin')
      clock.pass(700)
      scale.open('drops')
      clock.pass(400)
      scale.close()
      clock.pass(5000)
      return said
    }
    expect(await run()).toEqual(await run())
  })

  it('never stops a pour by itself, short of what it can carry', async () => {
    const { clock, scale, last } = place({ capacityG: '600' })
    await scale.connect()
    scale.open('pour')
    clock.pass(60_000)
    expect(scale.sight().flow).toBe('pour')
    expect(Number(last()?.grams)).toBeLessThanOrEqual(600 - 48)
  })

  it('shows the pan without the cup while it is lifted, and the same gram when it is back', async () => {
    const { clock, scale, last } = place({ inCupG: '500', readingG: '120' })
    await scale.connect()
    scale.lift()
    clock.pass(2000)
    // 120 g since the tare, less 500 g of material and the cup's own 48 g.
    expect(last()).toMatchObject({ grams: '-428', steady: true })
    scale.open('pour')
    expect(scale.sight().flow).toBeNull()
    scale.putBack()
    clock.pass(2000)
    expect(last()).toMatchObject({ grams: '120', steady: true })
  })

  it('comes back lighter when some was spilled', async () => {
    const { clock, scale, last } = place({ inCupG: '500', readingG: '120' })
    await scale.connect()
    scale.lift()
    scale.spill()
    scale.putBack()
    clock.pass(2000)
    expect(last()).toMatchObject({ grams: '115', steady: true })
  })

  it('tells nothing while its cable is out, and what stands on it once it is back', async () => {
    const { clock, scale, said } = place()
    const states: string[] = []
    scale.states(state => states.push(state))
    await scale.connect()
    scale.open('pour')
    clock.pass(200)
    const before = said.length
    scale.unplug()
    clock.pass(300)
    expect(said).toHaveLength(before)
    scale.close()
    scale.plugIn()
    expect(states).toEqual(['ready', 'lost', 'ready'])
    clock.pass(2000)
    expect(said.at(-1)).toMatchObject({ grams: '60', steady: true })
  })

  it('counts from zero after a tare and keeps what is in the cup', async () => {
    const { clock, scale, last } = place({ inCupG: '300', readingG: '300' })
    await scale.connect()
    await scale.tare()
    expect(last()?.grams).toBe('0')
    scale.lift()
    clock.pass(2000)
    expect(last()?.grams).toBe('-348')
  })
})
