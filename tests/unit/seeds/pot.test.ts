import { describe, expect, it } from 'vitest'
import { calculatePour } from '#shared/engine/pour'
import { mixes, type DemoRevision } from '../../../seeds/demo/mixes'
import { deviations, mixInputOf, planPot, potLifeOf, pourPot, suits, type Deviation } from '../../../seeds/demo/pot'
import { scales } from '../../../seeds/demo/places'
import { randomOf } from '../../../seeds/demo/random'
import { gramsOf } from '../../../seeds/demo/weights'
import { paperShop } from './builders'

const shop = paperShop()
const current = mixes.map(({ code, revisions }) => ({ code, revision: revisions.at(-1) as DemoRevision }))

/** Pours a pot and has the arithmetic judge it. */
function judged(revision: DemoRevision, totalG: string, deviation: Deviation | null, seed: number) {
  const { plan, scale, targets } = planPot(shop, revision, { totalG })
  const { weighings, correction } = pourPot(revision, targets, scale, randomOf(seed), deviation)
  const sums = revision.parts.map((_, index) => weighings.filter((one) => one.index === index).reduce((sum, { tenths }) => sum + tenths, 0))
  const record = scales.find(({ key }) => key === scale)
  const answer = calculatePour({
    mix: mixInputOf(shop, revision), scaleDivisionG: plan.scaleDivisionG, scaleMpeG: plan.scaleMpeG, targetTotalG: totalG,
    poured: sums.map((tenths, index) => ({ index, pouredG: gramsOf(tenths) })).filter(({ pouredG }) => pouredG !== '0'),
  }, { scale: record?.class ? { oimlClass: record.class, verificationIntervalG: record.interval } : {} })
  return { weighings, correction, answer, followers: answer.components.slice(1) }
}

describe('a careful hand', () => {
  it.each(current)('pours $code in tolerance whatever the chance', ({ revision }) => {
    for (let seed = 0; seed < 40; seed++) {
      const { followers } = judged(revision, '1200', null, seed)
      expect(followers.map(({ verdict }) => verdict)).toEqual(followers.map(() => 'in-tolerance'))
    }
  })

  it('takes the coarse scale where the fine one cannot carry the pot', () => {
    const revision = current.find(({ code }) => code === 'US-40')?.revision as DemoRevision
    expect(planPot(shop, revision, { totalG: '5000' }).scale).toBe('fine')
    expect(planPot(shop, revision, { totalG: '6000' }).scale).toBe('coarse')
    const { weighings } = judged(revision, '6000', null, 1)
    expect(weighings.filter(({ tenths }) => tenths % 10 !== 0)).toEqual([])
  })
})

describe('what goes wrong on purpose', () => {
  const sealer = current.find(({ code }) => code === 'US-40')?.revision as DemoRevision

  it('a hardener that is short leaves the ratio by 5 to 7 %', () => {
    const { followers } = judged(sealer, '1700', 'hardener-short', 5)
    expect(followers[0]?.verdict).toBe('short')
    expect(followers[0]?.deviationPct).toMatch(/^-[567]/)
    expect(followers[1]?.verdict).toBe('in-tolerance')
  })

  it('an over-pour is corrected: nothing is taken out and every ratio is right again', () => {
    const { followers, weighings, correction } = judged(sealer, '1700', 'over-pour', 5)
    expect(followers.map(({ verdict }) => verdict)).toEqual(['in-tolerance', 'in-tolerance'])
    expect(weighings.map(({ index, round }) => [index, round])).toEqual([[0, 0], [1, 0], [0, 1], [2, 0]])
    expect(weighings.every(({ tenths }) => tenths > 0)).toBe(true)
    expect(correction).toMatchObject({ cause: 'reactive-too-much', accepted: true })
  })

  it('too much thinner is kept with a reason', () => {
    const { followers, correction } = judged(sealer, '1700', 'thinner-much', 5)
    expect(followers.map(({ verdict }) => verdict)).toEqual(['in-tolerance', 'too-much'])
    expect(correction).toMatchObject({ cause: 'thinner-too-much', accepted: false, reason: expect.stringMatching(/\w/) })
  })

  it('a stopped mix never gets its thinner', () => {
    expect(judged(sealer, '1700', 'stopped', 5).weighings.map(({ index }) => index)).toEqual([0, 1])
  })

  it('happens only to mixes that it can happen to', () => {
    const stain = current.find(({ code }) => code === 'ST-600')?.revision as DemoRevision
    expect(deviations.filter((deviation) => suits(stain, deviation))).toEqual([])
    expect(deviations.filter((deviation) => suits(sealer, deviation))).toEqual([...deviations])
  })
})

describe('the life of a pot', () => {
  it('is the sheet\'s at 20 °C, shorter above, never longer below', () => {
    const sealer = current.find(({ code }) => code === 'US-40')?.revision as DemoRevision
    expect(potLifeOf(sealer, '20')).toEqual({ lifeMin: 120, lateMin: 90 })
    expect(potLifeOf(sealer, '30')).toEqual({ lifeMin: 60, lateMin: 45 })
    expect(potLifeOf(sealer, '12')).toEqual({ lifeMin: 120, lateMin: 90 })
  })

  it('is none where nothing reacts', () => {
    const stain = current.find(({ code }) => code === 'ST-600')?.revision as DemoRevision
    expect(potLifeOf(stain, '20')).toBeNull()
  })
})
