import { describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { BatchCloseBody, BatchListQuery } from '#shared/schemas/batches'
import { DraftBody } from '#shared/schemas/drafts'

const id = '7d7f3c1e-4a52-4f6d-9c0b-0a1b2c3d4e5f'
const body = { seq: 1, planId: id, potNumber: 1, potCount: 1, mixRevisionId: id, purpose: 'sample boards', mixedByUserId: id, plan: { totalG: '300', scaleDivisionG: '0.1' } }
const faults = (more: object) => z.safeParse(DraftBody, { ...body, ...more }).error?.issues.map(({ path }) => path.join('.')) ?? []
const pour = (grams: unknown) => [{ index: 0, pours: [{ lotId: id, grams, at: '2026-11-17T07:00:00.000Z', source: 'typed', round: 0 }] }]

describe('the body of a draft', () => {
  it('needs little, and fills in the rest', () => {
    expect(z.parse(DraftBody, body)).toMatchObject({ jobStepId: null, pieceIds: [], components: [], reactiveAt: null, device: null, stopped: null })
  })
  it('is taken again as it was answered, also where a stopped mix names no disposal', () => {
    const stored = z.parse(DraftBody, { ...body, stopped: { at: '2026-11-17T07:00:00.000Z', reason: 'Spilled' } })
    expect(stored.stopped?.disposal).toBe('')
    expect(z.parse(DraftBody, stored)).toEqual(stored)
  })
  it('takes ids in any case and stores them in one', () => {
    expect(z.parse(DraftBody, { ...body, planId: id.toUpperCase() }).planId).toBe(id)
  })
  it.each([
    ['a loose mix without its purpose', { purpose: null }, ['purpose']],
    ['blank words', { purpose: '  ' }, ['purpose']],
    ['pot 2 of 1', { potNumber: 2 }, ['potNumber']],
    ['a component twice', { components: [...pour('1'), ...pour('2')] }, ['components']],
    ['a piece twice', { pieceIds: [id, id] }, ['pieceIds']],
    ['grams with a comma', { components: pour('1,5') }, ['components.0.pours.0.grams']],
    ['grams as a number', { components: pour(1.5) }, ['components.0.pours.0.grams']],
    ['grams finer than the record', { components: pour('1.00001') }, ['components.0.pours.0.grams']],
    ['grams with an exponent', { components: pour('1e3') }, ['components.0.pours.0.grams']],
    ['an instant without milliseconds', { reactiveAt: '2026-11-17T07:00:00Z' }, ['reactiveAt']],
    ['an instant of no calendar', { reactiveAt: '2026-02-30T07:00:00.000Z' }, ['reactiveAt']],
    ['an instant with an offset', { reactiveAt: '2026-11-17T07:00:00.000+01:00' }, ['reactiveAt']],
    ['a humidity over 100 %', { climate: { airC: '20', rhPct: '100.1' } }, ['climate.rhPct']],
    ['a step below 1', { seq: 0 }, ['seq']],
    ['a field that nobody knows', { colour: 'red' }, ['']],
  ])('refuses %s', (_what, more, paths) => {
    expect(faults(more)).toEqual(paths)
  })
  it('lets grams below nothing through to the rule that names them', () => {
    expect(faults({ components: pour('-1') })).toEqual([])
  })
})

describe('the body of an emptied pot', () => {
  it('says grams or that nobody weighed', () => {
    expect(z.parse(BatchCloseBody, { leftoverG: null })).toEqual({ leftoverG: null, at: null })
    expect(z.safeParse(BatchCloseBody, {}).success).toBe(false)
    expect(z.safeParse(BatchCloseBody, { leftoverG: '-1' }).success).toBe(false)
  })
})

describe('the filters of the log', () => {
  it('are read from the address', () => {
    expect(z.parse(BatchListQuery, { deviations: 'true', review: 'false', limit: '20' })).toEqual({ deviations: true, review: false, limit: 20 })
    expect(z.parse(BatchListQuery, {}).limit).toBe(50)
  })
  it.each([{ limit: '0' }, { limit: '201' }, { limit: '1.5' }, { from: '17.11.2026' }, { to: '2026-02-30' }, { jobId: 'x' }, { state: 'open' }, { deviations: '1' }, { unknown: 'x' }])('refuse %j', (query) => {
    expect(z.safeParse(BatchListQuery, query).success).toBe(false)
  })
})
