import { beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { calculations, type CalculationName } from '#shared/schemas/calculations'
import { Client, enrolled, signedInOften } from './support/http'

let sprayer: Client
beforeAll(async () => {
  sprayer = await signedInOften('sprayer')
})

const mix = { basis: 'weight', components: [{ name: 'base', parts: '100', densityGPerMl: '1.25' }, { name: 'hardener', parts: '25' }] }
const batch = {
  mix, areaM2: '21.6', filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1,
  transferEfficiencyPct: '60', reserveG: '60', reservePct: '0', scaleDivisionG: '0.1',
}

/** One body of each that is answered. */
const bodies: Record<CalculationName, object> = {
  'batch': batch,
  'pour': { mix, scaleDivisionG: '0.1', targetTotalG: '1253.8', poured: [{ index: 0, pouredG: '1003.0' }] },
  'film': { densityGPerMl: '1.2', volumeSolidsPct: '40', filmWeightGsm: '120' },
  'pots': { mix, sprayG: '4320', residueG: '60', areaM2: '21.6', cupCapacityG: '2300', scaleDivisionG: '0.1', paceM2PerH: '9', potLifeMin: '240' },
  'pot-life': { referenceMin: '240', referenceC: '20', temperatureC: '30' },
  'window': { firstSprayedAt: '2026-12-01T08:00:00.000Z', lastSprayedAt: '2026-12-01T08:30:00.000Z', minMin: '90', maxMin: '480', now: '2026-12-01T10:30:00.000Z' },
  'day-plan': {
    steps: [{ name: 'seal' }, { name: 'topcoat', minMin: '120', maxMin: '480' }],
    workingIntervals: [{ from: '2026-12-01T06:30:00.000Z', to: '2026-12-01T15:00:00.000Z' }],
    paceM2PerH: '9', areaM2: '12', from: '2026-12-01T06:30:00.000Z',
  },
  'emissions': { components: [{ massG: '1000', densityGPerMl: '1.0', solidsPct: '50', vocPct: '50' }] },
  'viscosity': { cup: 'din-4', seconds: '25' },
  'dew-point': { airC: '20', rhPct: '60', surfaceC: '19' },
}

const run = (name: string, body: unknown, client = sprayer) => client.post(`/api/calculations/${name}`, body, { headers: { 'idempotency-key': undefined } })

describe('POST /api/calculations/{name}', () => {
  it.each(Object.entries(bodies))('%s answers in its own shape, without an idempotency key', async (name, body) => {
    const { status, body: answer } = await run(name, body)
    expect(status, JSON.stringify(answer)).toBe(200)
    expect(z.safeParse(calculations[name as CalculationName].answer, answer).success, JSON.stringify(answer)).toBe(true)
  })

  it('works out the area of the example by hand: 21.6 × 120 ÷ 60 % + 60 = 4380 g', async () => {
    const { body } = await run('batch', batch)
    expect(body).toMatchObject({ depositedG: '2592', sprayedG: '4320', exactTotalG: '4380', targetTotalG: '4380', tooSmallForScale: false })
    expect(body.components).toMatchObject([{ targetG: '3504', runningTotalG: '3504' }, { targetG: '876', runningTotalG: '4380', volumeMl: null }])
  })

  it('follows the base as poured', async () => {
    const { body } = await run('pour', bodies.pour)
    expect(body.components).toMatchObject([{ pouredG: '1003', verdict: 'in-tolerance' }, { targetG: '250.8', pouredG: null, verdict: null }])
  })

  it('halves a pot life ten degrees above its sheet', async () => {
    const { body } = await run('pot-life', bodies['pot-life'])
    expect(body).toMatchObject({ potLifeMin: '120', basis: 'rule' })
  })

  it.each([
    ['batch', { ...batch, areaM2: '-1' }, 'areaM2'],
    ['batch', { ...batch, totalG: '100' }, 'areaM2'],
    ['batch', { ...batch, transferEfficiencyPct: '0' }, 'transferEfficiencyPct'],
    ['batch', { ...batch, mix: { basis: 'volume', components: [{ name: 'a', parts: '1' }] } }, 'mix.components.0.densityGPerMl'],
    ['film', { densityGPerMl: '1.2', volumeSolidsPct: '40' }, 'dryUm'],
    ['dew-point', { airC: '20', rhPct: '101' }, 'rhPct'],
  ])('%s refuses %j at its field', async (name, body, path) => {
    const { status, body: answer } = await run(name, body)
    expect(status).toBe(400)
    expect(answer).toMatchObject({ code: expect.any(String), message: expect.any(String), fields: [{ path, message: expect.any(String) }] })
  })

  it.each([
    ['no body at all', undefined],
    ['a list', []],
    ['a word', 'grams'],
    ['null', null],
    ['a number where a decimal belongs', { ...batch, areaM2: 21.6 }],
    ['an exponent', { ...batch, areaM2: '2e1' }],
    ['a comma', { ...batch, areaM2: '21,6' }],
    ['a member that nobody knows', { ...batch, colour: 'white' }],
    ['no components', { ...batch, mix: { basis: 'weight', components: [] } }],
  ])('%s is 400 with the fields named', async (_, body) => {
    const { status, body: answer } = await run('batch', body)
    expect(status).toBe(400)
    expect(answer.code).toBe('invalid')
    expect((answer.fields as unknown[]).length).toBeGreaterThan(0)
  })

  it('never echoes what it refused', async () => {
    const { body } = await run('batch', { ...batch, areaM2: 'twelve-and-a-half' })
    expect(JSON.stringify(body)).not.toContain('twelve-and-a-half')
  })

  it.each(['brew', 'toString', '__proto__', 'constructor', 'x'.repeat(64)])('%s is no calculation', async (name) => {
    const { status, body } = await run(name, {})
    expect(status).toBe(404)
    expect(body.code).toBe('not-found')
  })

  it('asks to sign in, and is not for a booth screen', async () => {
    expect((await run('batch', batch, new Client())).status).toBe(401)
    const { body } = await sprayer.get<{ items: { id: string }[] }>('/api/booths')
    const screen = await enrolled('screen', body.items[0]?.id ?? '')
    expect((await run('batch', batch, screen)).status).toBe(403)
  })
})
