import fc from 'fast-check'
import * as z from 'zod/mini'
import { describe, expect, it } from 'vitest'
import { EngineError } from '#shared/engine/error'
import { calculations, findCalculation } from '#shared/schemas/calculations'
import type { CalculationName } from '#shared/schemas/calculations'

const mix = {
  basis: 'weight',
  components: [{ name: 'base', parts: '100', densityGPerMl: '1.25' }, { name: 'hardener', parts: '25' }],
}

/** One body a calculation, and some of what it must answer. */
const examples: Record<CalculationName, { body: Record<string, unknown>, answer: object }> = {
  'batch': {
    body: { mix, areaM2: '21.6', filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, transferEfficiencyPct: '60', reserveG: '60', reservePct: '0', scaleDivisionG: '0.1' },
    answer: { exactTotalG: '4380', components: [{ targetG: '3504' }, { targetG: '876' }] },
  },
  'pour': {
    body: { mix, scaleDivisionG: '0.1', targetTotalG: '1250', poured: [{ index: 0, pouredG: '1003.0' }] },
    answer: { components: [{ verdict: 'in-tolerance' }, { targetG: '250.8', verdict: null }], correctionNeeded: false },
  },
  'film': {
    body: { densityGPerMl: '1.02', volumeSolidsPct: '40', dryUm: '60' },
    answer: { wetUm: '150', filmWeightGsm: '153' },
  },
  'pots': {
    body: { mix, sprayG: '4320', residueG: '60', areaM2: '21.6', cupCapacityG: '2500', scaleDivisionG: '1', paceM2PerH: '12', potLifeMin: '240' },
    answer: { boundBy: 'cup', pots: [{ totalG: '2220', startsAfterMin: '0' }, { totalG: '2220', startsAfterMin: '54' }] },
  },
  'pot-life': {
    body: { referenceMin: '120', referenceC: '20', temperatureC: '30' },
    answer: { potLifeMin: '60', lateAfterMin: '45', usableMin: '45', basis: 'rule' },
  },
  'window': {
    body: { firstSprayedAt: '2026-11-17T08:00:00.000Z', lastSprayedAt: '2026-11-17T08:30:00.000Z', minMin: '120', maxMin: '240', now: '2026-11-17T10:30:00.000Z' },
    answer: { opensAt: '2026-11-17T10:30:00.000Z', closesAt: '2026-11-17T12:00:00.000Z', closingAt: '2026-11-17T11:51:00.000Z', state: 'open', empty: false },
  },
  'day-plan': {
    body: {
      steps: [{ name: 'sealer' }, { name: 'sand', workMin: '30', minMin: '120', maxMin: null }],
      workingIntervals: [{ from: '2026-11-17T06:00:00.000Z', to: '2026-11-17T15:00:00.000Z' }],
      paceM2PerH: '12', areaM2: '6', from: '2026-11-17T06:00:00.000Z',
    },
    answer: { starts: [{ name: 'sealer', startsAt: '2026-11-17T12:00:00.000Z' }, { name: 'sand', endsAt: '2026-11-17T15:00:00.000Z' }], brokenBy: null, nextStart: null },
  },
  'emissions': {
    body: { components: [{ massG: '1000', densityGPerMl: '1.25', solidsPct: '60', vocPct: '40' }] },
    answer: { vocG: '400', vocGPerL: '500' },
  },
  'viscosity': {
    body: { cup: 'din-4', seconds: '25', toCup: 'iso-4' },
    answer: { mm2PerS: '96.17', approximate: true },
  },
  'dew-point': {
    body: { airC: '23', rhPct: '50', surfaceC: '20' },
    answer: { ok: true },
  },
}
const names = Object.keys(examples) as CalculationName[]

function answerOf(name: string, body: unknown): unknown {
  const calculation = findCalculation(name)
  if (calculation === null) throw new Error(`No calculation ${name}`)
  return calculation.run(z.parse(calculation.body, body))
}

describe('calculations over HTTP', () => {
  it('are the ten of the table', () => {
    expect(Object.keys(calculations).sort()).toEqual([...names].sort())
    expect(names).toHaveLength(10)
    expect(['nothing', 'toString', '__proto__', ''].map(findCalculation)).toEqual([null, null, null, null])
  })

  it.each(names)('%s answers its example in its own shape, nothing more and nothing less', (name) => {
    const answer = answerOf(name, examples[name].body)
    expect(answer).toMatchObject(examples[name].answer)
    expect(z.parse(calculations[name].answer as z.ZodMiniType, answer)).toEqual(answer)
  })

  it.each(names)('%s refuses what is missing or of another kind, beside the field', (name) => {
    for (const field of Object.keys(examples[name].body)) {
      for (const bad of [{}, [], 5.5, true, '1e3', 'x', '1,5', '٣', '']) {
        const parsed = z.safeParse(calculations[name].body as z.ZodMiniType, { ...examples[name].body, [field]: bad })
        if (!parsed.success) {
          expect(parsed.error.issues.every(issue => issue.path[0] === field && issue.message !== '')).toBe(true)
          continue
        }
        expect(['mix', 'steps']).not.toContain(field)
      }
    }
  })

  it.each(names)('%s refuses a field it does not know', (name) => {
    expect(z.safeParse(calculations[name].body as z.ZodMiniType, { ...examples[name].body, unknown: '1' }).success).toBe(false)
  })

  it('a decimal comma is for forms, not for the API', () => {
    expect(z.safeParse(calculations.batch.body, { ...examples.batch.body, areaM2: '21,6' }).success).toBe(false)
  })

  it('an instant without milliseconds or zone is none', () => {
    for (const now of ['2026-11-17T10:30:00Z', '2026-11-17T10:30:00.000', '2026-11-17', '2026-02-30T10:30:00.000Z']) {
      expect(z.safeParse(calculations.window.body, { ...examples.window.body, now }).success).toBe(false)
    }
  })

  it.each(names)('%s never fails in any other way than by an error of its own, and never says NaN', (name) => {
    const texts = fc.constantFrom('0', '-1', '0.000000000001', '1', '100', '999999999999', '5255999', '1000000000')
    const fields = fc.dictionary(fc.constantFrom(...Object.keys(examples[name].body)), texts, { maxKeys: 4 })
    fc.assert(fc.property(fields, (changes) => {
      const parsed = z.safeParse(calculations[name].body as z.ZodMiniType, { ...examples[name].body, ...changes })
      if (!parsed.success) return
      try {
        const answer = (calculations[name].run as (body: unknown) => unknown)(parsed.data)
        expect(JSON.stringify(answer)).not.toMatch(/NaN|Infinity|\de[+-]?\d/)
        expect(z.safeParse(calculations[name].answer as z.ZodMiniType, answer).success).toBe(true)
      }
      catch (error) {
        if (!(error instanceof EngineError)) throw error
        expect(Object.keys({ ...examples[name].body, ...changes, mix: 1, thinnerPctByVolume: 1, toCup: 1, available: 1 }))
          .toContain(error.field.split('.')[0])
      }
    }), { numRuns: 150 })
  })
})
