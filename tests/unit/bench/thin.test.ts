import { describe, expect, it } from 'vitest'
import { judgeRun } from '#shared/utils/bench-judge'
import { nextStep, walkStep, type BenchRun } from '#shared/utils/bench-run'
import { addThinner, isMeasuredBefore, thinnerRoom, viscosityVerdict } from '#shared/utils/bench-thin'
import { atMs, begin, pour, typed } from './pots'
import { snapshot, tools } from './shop'

/** The shop's mix with thinner 20 to 30 parts and 18 to 22 s in the DIN 4 mm cup. */
function ranged() {
  const shop = snapshot()
  const [mix] = shop.mixes
  if (mix === undefined) throw new Error('no mix')
  return tools({
    ...shop,
    mixes: [{
      ...mix, viscosityCup: 'din-4', viscositySecondsMin: '18', viscositySecondsMax: '22',
      components: mix.components.map(part => (part.role === 'thinner' ? { ...part, partsMax: '30' } : part)),
    }],
  })
}
const kit = ranged()
/** 876.5 : 438.2 : 175.3 g are in. */
const full = (): BenchRun => pour(pour(pour(begin(), '876.5'), '438.2', 60_000), '175.3', 120_000)
const measured = (run: BenchRun, seconds: string, cup = 'din-4', ms = 180_000): BenchRun =>
  ({ ...run, viscosity: { cup, seconds, materialC: '20' }, viscosityAt: new Date(atMs + ms).toISOString() })
const room = (run: BenchRun, ms = 180_000) => thinnerRoom(run, kit, judgeRun(run, kit).answer, atMs + ms)

describe('the viscosity', () => {
  it.each([['25', 'too-thick'], ['22', 'in-range'], ['18', 'in-range'], ['17.9', 'too-thin']])('of %s s is %s', (seconds, verdict) => {
    expect(viscosityVerdict(measured(full(), seconds), kit)).toBe(verdict)
  })

  it('in another cup than the sheet\'s is not judged', () => expect(viscosityVerdict(measured(full(), '25', 'ford-4'), kit)).toBe('other-cup'))
  it('that nobody measured is not judged', () => expect(viscosityVerdict(full(), kit)).toBeNull())
})

describe('thinner within its range', () => {
  it('goes up to the high end', () => {
    // 30 parts to 100 of 876.5 g are 263.0 g on the division, of which 175.3 are in.
    expect(room(full())).toEqual({ index: 2, roomG: '87.7' })
  })

  it('has no room once its range is full, or in a pot whose life is up', () => {
    expect(room(pour(addThinner(full(), 2), '87.7', 200_000))).toBeNull()
    expect(room(full(), 241 * 60_000 + 60_000)).toBeNull()
  })

  it('is never more than the cup holds', () => {
    const small = { ...kit, limitG: '1500' }
    expect(thinnerRoom(full(), small, judgeRun(full(), kit).answer, atMs)).toEqual({ index: 2, roomG: '10' })
  })

  it('is a weighing of its own, stirred in, and the pot keeps its moments', () => {
    const before = { ...full(), stirredAt: new Date(atMs + 150_000).toISOString() }
    const adding = addThinner(measured(before, '25'), 2)
    expect(judgeRun(adding, kit).weighing).toMatchObject({ index: 2, isThinning: true, targetG: '0', highG: '87.7', readingG: '0' })
    const poured = typed(adding, '40', 240_000)
    expect(judgeRun(poured, kit)).toMatchObject({ mayGoOn: true, needsCorrection: false })
    const stirring = nextStep(poured, atMs + 240_000)
    expect(walkStep(stirring)).toEqual({ kind: 'stir' })
    const back = nextStep(stirring, atMs + 300_000)
    expect(back).toMatchObject({ stage: 'stand', pouredAt: before.pouredAt, stirredAt: before.stirredAt })
    expect(back.pours.at(-1)).toMatchObject({ index: 2, round: 1, grams: '40' })
    expect(isMeasuredBefore(back, kit)).toBe(true)
    expect(viscosityVerdict(back, kit)).toBeNull()
    expect(viscosityVerdict(measured(back, '21', 'din-4', 400_000), kit)).toBe('in-range')
  })

  it('past its range asks for a word', () => {
    expect(judgeRun(typed(addThinner(full(), 2), '120', 240_000), kit)).toMatchObject({ needsCorrection: true, mayGoOn: false })
  })
})
