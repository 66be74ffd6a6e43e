import { describe, expect, it } from 'vitest'
import { explainLift, liftDifferenceG, scaleLost, takeCupReading, typeByHand } from '#shared/utils/bench-lift'
import { judgeRun } from '#shared/utils/bench-judge'
import { draftOf } from '#shared/utils/bench-draft'
import { inCupG, poursOf, type BenchRun } from '#shared/utils/bench-run'
import { DraftBody } from '#shared/schemas/drafts'
import { atMs, begin, kit, pour } from './pots'

const moment = (ms: number) => ({ at: atMs + ms, deviceAt: atMs + ms })
const read = (run: BenchRun, grams: string, ms = 0, steady = true): BenchRun =>
  takeCupReading(run, { grams, steady, at: atMs + ms }, 'simulated', moment(ms), kit)

/** 877.1 g of base in the cup and 396.4 g of hardener on the way. */
const pouring = (): BenchRun => read(read(pour(begin(), '877.1'), '390', 900, false), '396.4', 1000)

describe('a cup that is lifted', () => {
  it('pauses the pour at the last gram and never means the next component', () => {
    const lifted = read(pouring(), '-877.1', 2000, false)
    expect(lifted).toMatchObject({ place: pouring().place, lift: { grams: '396.4', at: '2026-11-17T08:00:01.000Z' }, reading: { grams: '396.4', steady: false } })
    expect(judgeRun(read(lifted, '-900', 4000), kit)).toMatchObject({ mayGoOn: false, needsCorrection: false })
    expect(inCupG(lifted)).toBe('1273.5')
  })

  it('is seen however slowly the scale falls', () => {
    const falling = ['380', '200', '-100', '-300'].reduce((run, grams, place) => read(run, grams, 1500 + 100 * place, false), pouring())
    expect(falling.lift).toMatchObject({ grams: '396.4' })
  })

  it('is not half a cup of scooping, and not a scale that settles', () => {
    expect(read(pouring(), '396.1', 2000).lift).toBeNull()
    const scooped = read(read(pouring(), '100', 2000, false), '100', 3000)
    expect(scooped).toMatchObject({ lift: null, reading: { grams: '100', steady: true } })
  })

  it('is seen with an empty cup too', () => {
    expect(read(read(begin(), '0', 0), '-48', 1000, false).lift).toMatchObject({ grams: '0' })
  })

  it.each(['396.4', '397.4', '395.4'])('goes on when it is back with %s g', (grams) => {
    const back = read(read(pouring(), '-900', 2000), grams, 5000)
    expect(back).toMatchObject({ lift: null, reading: { grams, steady: true } })
    expect(back.corrections).toEqual([])
  })

  it('is back only when the scale stands still', () => {
    expect(read(read(pouring(), '-900', 2000), '396.4', 4000, false).lift).not.toBeNull()
  })

  it('asks why when it is back with other grams, and keeps the word', () => {
    const asking = read(read(pouring(), '-900', 2000), '391.4', 5000)
    expect(liftDifferenceG(asking)).toBe('-5')
    expect(judgeRun(asking, kit).mayGoOn).toBe(false)
    const told = explainLift(asking, 'Some was poured out', moment(9000), kit)
    expect(told).toMatchObject({ lift: null, reading: { grams: '391.4', steady: true } })
    expect(told.corrections.at(-1)).toMatchObject({ cause: 'cup-lifted', accepted: false, reason: 'Cup lifted at 396.4 g, back at 391.4 g: Some was poured out' })
    expect(DraftBody.parse(draftOf({ ...told, seq: 1 }, new Date(atMs).toISOString(), 0)).corrections).toHaveLength(1)
  })

  it('keeps which scale saw the cup come back', () => {
    const cable = (run: BenchRun, grams: string, ms: number): BenchRun => takeCupReading(run, { grams, steady: true, at: atMs + ms }, 'scale', moment(ms), kit)
    const asking = cable(cable(cable(begin(), '396.4', 0), '-900', 2000), '391.4', 5000)
    expect(explainLift(asking, 'Some was poured out', moment(9000), kit).reading).toMatchObject({ grams: '391.4', source: 'scale' })
  })

  it('takes no word while it is off the scale', () => {
    const off = read(pouring(), '-900', 2000)
    expect(explainLift(off, 'Some was poured out', moment(9000), kit)).toBe(off)
  })

  it('starts no pot life', () => {
    const base = pour(begin(), '877.1')
    const lifted = read(base, '-900', 1000)
    expect(lifted.reactiveAt).toBeNull()
    expect(read(lifted, '0', 3000).reactiveAt).toBeNull()
  })
})

describe('a scale that is lost', () => {
  it('leaves what it last said, no longer steady', () => {
    expect(scaleLost(pouring()).reading).toMatchObject({ grams: '396.4', steady: false })
    const moving = read(pouring(), '400', 2000, false)
    expect(scaleLost(moving)).toBe(moving)
  })

  it('leaves the rest of the batch to the keypad, and its pours say so', () => {
    const typed = typeByHand(scaleLost(pouring()))
    expect(typed.byHand).toBe(true)
    expect(poursOf(typed).at(-1)).toMatchObject({ grams: '396.4', source: 'typed' })
  })
})
