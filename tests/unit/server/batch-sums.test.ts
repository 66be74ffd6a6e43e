import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { D } from '#shared/engine/decimal'
import type { DraftBody, DraftPlan } from '#shared/schemas/drafts'
import type { ScaleRecord } from '../../../server/repositories/draft-references'
import type { MixRevision, RevisionComponent } from '../../../server/repositories/mix-revisions'
import {
  canHold, judgeBatch, minutesMs, planOf, plansThisMix, potLives, potTimesOf, pouredOf, pouredTotalOf, reactiveByPours, scaleInputOf, wasCorrected,
} from '../../../server/services/batch-sums'

const component = (index: number, role: RevisionComponent['role'], parts: string, more: Partial<RevisionComponent> = {}): RevisionComponent => ({
  index, materialId: `m${index}`, materialCode: `M${index}`, materialName: role, chemistry: 'polyurethane', containsIsocyanates: false, role, parts,
  partsMax: null, tolerancePct: null, reactive: role === 'hardener', densityGPerMl: null, ...more,
})
const revision: MixRevision = {
  id: 'r', mixId: 'm', mixCode: 'M', mixName: 'Sealer', number: 1, basis: 'weight', potLifeMin: '120', potLifeReferenceC: '20', potLifeTable: null,
  halvesPerC: null, lateFromPct: '75', inductionMin: '0',
  components: [component(0, 'base', '100'), component(1, 'hardener', '50'), component(2, 'thinner', '20', { partsMax: '30' })],
}
const plan: DraftPlan = { totalG: '1700', scaleDivisionG: '0.1' }
const scale: ScaleRecord = { id: 's', divisionG: '1', capacityG: '2000', mpeG: '2', accuracyClass: null, verificationIntervalG: null }
const at = '2026-11-17T07:00:00.000Z'
const poured = (...grams: string[][]) => ({
  components: grams.map((pours, index) => ({ index, pours: pours.map((one) => ({ lotId: 'l', grams: one, at, source: 'typed' as const, round: 0 })) })),
})
const now = Date.parse(at)
const judged = (body: ReturnType<typeof poured>, corrections: DraftBody['corrections'] = []) => judgeBatch(revision, { plan, ...body, corrections }, null)

describe('a plan', () => {
  it('is for this mix when it names none, or the same within its ranges', () => {
    const mix = (...parts: string[]) => ({ mix: { basis: 'weight' as const, components: parts.map((one) => ({ name: 'x', parts: one })) } })
    expect(plansThisMix(revision, {})).toBe(true)
    expect(plansThisMix(revision, mix('100', '50', '20'))).toBe(true)
    expect(plansThisMix(revision, mix('100.0', '50', '30'))).toBe(true)
    expect(plansThisMix(revision, mix('100', '50', '30.1'))).toBe(false)
    expect(plansThisMix(revision, mix('100', '49', '20'))).toBe(false)
    expect(plansThisMix(revision, mix('100', '50'))).toBe(false)
    expect(plansThisMix(revision, { mix: { ...mix('100', '50', '20').mix, basis: 'volume' } })).toBe(false)
  })

  it('is reckoned with the parts it chose and the scale\'s own record', () => {
    const chosen = { ...plan, mix: { basis: 'weight' as const, components: ['100', '50', '30'].map((parts) => ({ name: 'x', parts })) } }
    expect(planOf(revision, chosen, null).components.map(({ targetG }) => targetG)).toEqual(['944.4', '472.2', '283.3'])
    expect(planOf(revision, chosen, scale).components.map(({ targetG }) => targetG)).toEqual(['944', '472', '283'])
  })

  it('names its field when it cannot be', () => {
    expect(() => planOf(revision, { ...plan, totalG: '0' }, null)).toThrow(expect.objectContaining({ code: 'too-small', field: 'plan.totalG' }))
    expect(() => planOf(revision, { scaleDivisionG: '0.1' }, null)).toThrow(expect.objectContaining({ code: 'amount-ways', field: 'plan.areaM2' }))
  })
})

describe('a scale', () => {
  it('follows its class only where its interval is known too', () => {
    expect(scaleInputOf({ ...scale, accuracyClass: 'III' }, plan)).not.toHaveProperty('oimlClass')
    expect(scaleInputOf({ ...scale, accuracyClass: 'III', verificationIntervalG: '1' }, plan)).toMatchObject({ oimlClass: 'III', verificationIntervalG: '1' })
    expect(scaleInputOf(null, plan)).toEqual({ divisionG: '0.1', mpeG: undefined })
  })

  it('holds its capacity and no more; without one, a tonne is the end', () => {
    expect(canHold(new D('2000'), scaleInputOf(scale, plan))).toBe(true)
    expect(canHold(new D('2000.0001'), scaleInputOf(scale, plan))).toBe(false)
    expect(canHold(new D('1000000'), scaleInputOf(null, plan))).toBe(true)
    expect(canHold(new D('1000000.0001'), scaleInputOf(null, plan))).toBe(false)
  })
})

describe('what was poured', () => {
  it('is summed for each component without a float; what was only named counts as not poured', () => {
    const body = poured(['0.1', '0.2'], ['0'], [])
    expect(pouredOf(body)).toEqual([{ index: 0, pouredG: '0.3' }])
    expect(pouredTotalOf(body).toString()).toBe('0.3')
  })

  it('is judged against the base as poured', () => {
    const sums = judged(poured(['1003'], ['501.5'], ['200']))
    expect(sums.pour.components.map(({ targetG, verdict }) => [targetG, verdict])).toEqual([['1000', 'in-tolerance'], ['501.5', 'in-tolerance'], ['200.6', 'in-tolerance']])
    expect(sums).toMatchObject({ pouredTotalG: '1704.5', outOfTolerance: false })
    expect(sums.worstDeviationPct).toBe('-0.299102691924')
    expect(sums.working.map(({ what }) => what)).toContain('hardener, target by the base as poured')
  })

  it('is out of tolerance by what follows the base, never by the base itself', () => {
    expect(judged(poured(['1200'], ['600'], ['240'])).outOfTolerance).toBe(false)
    expect(judged(poured(['1000'], ['520'], ['200']))).toMatchObject({ outOfTolerance: true, worstDeviationPct: '4' })
    expect(judged(poured(['1000'], ['500'], ['180']))).toMatchObject({ outOfTolerance: true, worstDeviationPct: '-10' })
  })

  it('measures the base by the correction that was taken, and by the plan where one was declined', () => {
    const correction = { at, cause: 'reactive-too-much', newTargets: ['1200', '600', '240'], reason: null, approvalId: null }
    const cup = poured(['1000', '200'], ['600'], ['240'])
    expect(judged(cup, [{ ...correction, accepted: true }]).pour.components[0]).toMatchObject({ targetG: '1200', verdict: 'in-tolerance', deviationPct: '0' })
    expect(judged(cup, [{ ...correction, accepted: false }]).pour.components[0]).toMatchObject({ targetG: '1000', verdict: 'too-much' })
  })

  it('has no ratio while the base is missing', () => {
    expect(judged(poured([], ['500']))).toMatchObject({ worstDeviationPct: null, pouredTotalG: '500' })
  })

  it('adds up to its parts, whatever was poured', () => {
    const tenths = fc.integer({ min: 1, max: 20_000 }).map((n) => new D(n).div(10).toString())
    fc.assert(fc.property(fc.array(tenths, { minLength: 1, maxLength: 5 }), fc.array(tenths, { maxLength: 5 }), tenths, (base, hardener, thinner) => {
      const { pouredTotalG, pour } = judged(poured(base, hardener, [thinner]))
      const whole = [...base, ...hardener, thinner].reduce((total, one) => total.plus(one), new D(0))
      expect(pouredTotalG).toBe(whole.toString())
      expect(pour.components.reduce((total, one) => total.plus(one.pouredG ?? 0), new D(0)).toString()).toBe(pouredTotalG)
    }))
  })
})

describe('a correction', () => {
  const parts = [{ index: 0, role: 'base', verdict: 'in-tolerance' as const }, { index: 1, role: 'hardener', verdict: 'in-tolerance' as const }, { index: 2, role: 'thinner', verdict: 'in-tolerance' as const }]
  const once = [0, 1, 2].map((index) => ({ index, round: 0 }))

  it('is one that somebody took, or more of something that was in already', () => {
    expect(wasCorrected([], once, parts)).toBe(false)
    expect(wasCorrected([{ accepted: false }], once, parts)).toBe(false)
    expect(wasCorrected([{ accepted: true }], once, parts)).toBe(true)
    expect(wasCorrected([], [...once, { index: 1, round: 1 }], parts)).toBe(true)
  })

  it('is not thinner added within its range, but thinner past it is', () => {
    const thinned = [...once, { index: 2, round: 1 }]
    expect(wasCorrected([], thinned, parts)).toBe(false)
    expect(wasCorrected([], thinned, parts.map((one) => (one.role === 'thinner' ? { ...one, verdict: 'too-much' as const } : one)))).toBe(true)
    expect(wasCorrected([{ accepted: true }], thinned, parts)).toBe(true)
  })
})

describe('a pot\'s life', () => {
  it('runs where something reacts and the sheet says how long', () => {
    expect(potLives(revision)).toBe(true)
    expect(potLives({ ...revision, potLifeMin: null })).toBe(false)
    expect(potLives({ ...revision, potLifeReferenceC: null })).toBe(false)
    expect(potLives({ ...revision, components: revision.components.slice(0, 1) })).toBe(false)
    expect(potLives({ ...revision, components: revision.components.map((one) => ({ ...one, reactive: false })) })).toBe(false)
  })

  const climate = (airC: string) => ({ climate: { airC, rhPct: '50', surfaceC: null }, viscosity: null })
  it('ends by the warmer of air and material', () => {
    const viscosity = { cup: 'din-4', seconds: '25', materialC: '30' }
    expect(potTimesOf(revision, climate('20'), now)).toMatchObject({ lateAt: now + 90 * 60_000, endsAt: now + 120 * 60_000, basis: 'sheet' })
    expect(potTimesOf(revision, { ...climate('20'), viscosity }, now)).toMatchObject({ lateAt: now + 45 * 60_000, endsAt: now + 60 * 60_000, basis: 'rule', temperatureC: '30' })
  })

  it('counts from the careful side where nobody measured', () => {
    const none = { climate: null, viscosity: null }
    expect(potTimesOf(revision, none, now)).toMatchObject({ temperatureC: '20', endsAt: now + 120 * 60_000 })
    const potLifeTable = [{ c: '15', min: '200' }, { c: '30', min: '60' }, { c: '20', min: '120' }]
    expect(potTimesOf({ ...revision, potLifeTable }, none, now)).toMatchObject({ temperatureC: '30', endsAt: now + 60 * 60_000, basis: 'table' })
    expect(potTimesOf(revision, none, null)).toBeNull()
  })

  it('never grows with temperature', () => {
    const tenths = fc.integer({ min: -100, max: 600 })
    fc.assert(fc.property(tenths, tenths, (a, b) => {
      const [cold, warm] = a < b ? [a, b] : [b, a]
      const ends = (c: number) => potTimesOf(revision, climate(new D(c).div(10).toString()), now)?.endsAt ?? 0
      expect(ends(warm)).toBeLessThanOrEqual(ends(cold))
    }))
  })

  it('starts with the first gram of something reactive beside another', () => {
    const body = poured(['1000'], ['500'])
    const [base, hardener] = body.components
    if (hardener?.pours[0]) hardener.pours[0].at = '2026-11-17T06:50:00.000Z'
    expect(reactiveByPours(revision, body, now)).toBe(now)
    expect(reactiveByPours(revision, { components: base ? [base] : [] }, now)).toBeNull()
    expect(reactiveByPours(revision, body, now - 60_000)).toBe(now - 60_000)
  })

  it('is rounded down to the millisecond', () => {
    expect(minutesMs('0.0001')).toBe(6)
    expect(minutesMs('0.00003')).toBe(1)
    expect(minutesMs('90')).toBe(5_400_000)
  })
})
