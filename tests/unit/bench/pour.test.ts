import { describe, expect, it } from 'vitest'
import { acceptCorrection, correctionLines, culpritOf, judgeRun, keepAsPoured } from '#shared/utils/bench-judge'
import { draftOf } from '#shared/utils/bench-draft'
import { reckon } from '#shared/utils/bench-reckon'
import { asksBeforeTare, tared } from '#shared/utils/bench-lift'
import { acceptUndecided, baseStirred, nextStep, poursOf, pouredG, startRun, stopRun, takeReading } from '#shared/utils/bench-run'
import { canEmpty } from '#shared/utils/bench-tin'
import type { BenchRun } from '#shared/utils/bench-run'
import { DraftBody } from '#shared/schemas/drafts'
import { id, setup, snapshot, tools } from './shop'

const at = Date.parse('2026-11-17T08:00:00.000Z')
const kit = tools()

function begin(): BenchRun {
  const pot = reckon(setup({ areaM2: '6.7' }), snapshot()).pots[0]
  if (pot === undefined) throw new Error('no pot')
  return baseStirred(startRun({
    id: id(90), planId: id(91), pot, potCount: 1, tools: kit, jobStepId: null, purpose: 'sample', mixedByUserId: id(92), lots: [id(21), id(24), id(25)],
  }))
}

const read = (run: BenchRun, grams: string, ms = 0, steady = true): BenchRun =>
  takeReading(run, { grams, steady, at: at + ms }, 'typed', { at: at + ms, deviceAt: at + ms - 5000 }, kit)
const pour = (run: BenchRun, grams: string, ms = 0): BenchRun => nextStep(read(run, grams, ms), at + ms)

describe('pouring', () => {
  it('lets the others follow the base as poured', () => {
    const run = pour(begin(), '877.1')
    // 438.55 and 175.42, to the nearest 0.1 g.
    expect(judgeRun(run, kit).answer.components.map(({ targetG }) => targetG)).toEqual(['876.5', '438.6', '175.4'])
  })

  it.each([
    ['400', 'short', false], ['438', 'in-tolerance', true], ['425.4', 'cannot-tell', false], ['460.5', 'too-much', false],
  ])('judges %s g of hardener as %s', (grams, verdict, mayGoOn) => {
    const judged = judgeRun(read(pour(begin(), '877.1'), grams), kit)
    expect(judged.weighing?.verdict).toBe(verdict)
    expect(judged.mayGoOn).toBe(mayGoOn)
  })

  it('holds the way on while a weight is not steady', () => {
    expect(judgeRun(read(begin(), '876.5', 0, false), kit).mayGoOn).toBe(false)
  })

  it('goes on past what the scale cannot tell once it is accepted', () => {
    const run = acceptUndecided(read(pour(begin(), '877.1'), '425.4'), 1)
    expect(judgeRun(run, kit).mayGoOn).toBe(true)
  })

  it('asks for nothing when the base is more than planned', () => {
    const judged = judgeRun(read(begin(), '950'), kit)
    expect(judged).toMatchObject({ baseLeads: true, mayGoOn: true, needsCorrection: false })
  })

  it('starts the pot life with the first steady gram of hardener, once', () => {
    const base = pour(begin(), '877.1')
    expect(base.reactiveAt).toBeNull()
    expect(read(base, '4', 60_000, false).reactiveAt).toBeNull()
    const first = read(base, '4', 60_000)
    expect(first.reactiveAt).toBe('2026-11-17T08:01:00.000Z')
    expect(first.deviceReactiveAt).toBe('2026-11-17T08:00:55.000Z')
    expect(read(first, '438', 120_000).reactiveAt).toBe('2026-11-17T08:01:00.000Z')
  })

  it('walks from the last component to stirring and standing', () => {
    const run = pour(pour(pour(begin(), '876.5'), '438.2'), '175.3', 180_000)
    expect(run).toMatchObject({ stage: 'stand', pouredAt: '2026-11-17T08:03:00.000Z' })
  })
})

describe('tins and tare', () => {
  it('closes the empty tin at the grams that stand and goes on to the same target', () => {
    const run = read(canEmpty(read(begin(), '500'), id(22)), '876.5')
    expect(poursOf(run).map(({ lotId, grams }) => [lotId, grams])).toEqual([[id(21), '500'], [id(22), '376.5']])
    expect(pouredG(run, 0)).toBe('876.5')
    expect(judgeRun(run, kit).weighing?.verdict).toBe('in-tolerance')
  })

  it('keeps what was in before the tare', () => {
    const run = read(tared(read(begin(), '500')), '376.5')
    expect(pouredG(run, 0)).toBe('876.5')
  })
})

describe('correction', () => {
  const over = (): BenchRun => read(pour(begin(), '877.1'), '460.5')

  it('brings the others up to a hardener that is too much', () => {
    const { answer, needsCorrection } = judgeRun(over(), kit)
    expect(needsCorrection).toBe(true)
    expect(correctionLines(kit, answer).map(({ newTargetG, doThis, addG }) => [newTargetG, doThis, addG]))
      .toEqual([['921', 'add', '43.9'], ['460.5', 'leave', '0'], ['184.2', 'pour', '184.2']])
    expect(answer.newTotalG).toBe('1565.7')
  })

  it('walks the base again, then on to the thinner with its new target', () => {
    const run = over()
    const walked = nextStep(acceptCorrection(run, kit, judgeRun(run, kit).answer, at), at)
    expect(judgeRun(walked, kit).weighing).toMatchObject({ index: 0, isTopUp: true, targetG: '43.9', readingG: '0' })
    const added = read(walked, '43.9')
    expect(judgeRun(added, kit).mayGoOn).toBe(true)
    const thinner = nextStep(added, at)
    expect(judgeRun(thinner, kit)).toMatchObject({ weighing: { index: 2, isTopUp: false, targetG: '184.2' }, needsCorrection: false })
    expect(pour(thinner, '184.2').stage).toBe('stand')
  })

  it('blames the hardener, not a base that leads', () => {
    const run = read(pour(begin(), '950'), '520')
    const { answer } = judgeRun(run, kit)
    expect(answer.components.map(({ verdict }) => verdict)).toEqual(['too-much', 'too-much', null])
    expect(culpritOf(kit, answer, [])).toBe(1)
    expect(culpritOf(kit, answer, [1])).toBeNull()
  })

  it('goes on when it is kept with a reason and a word for it', () => {
    const run = over()
    const kept = keepAsPoured(run, judgeRun(run, kit).answer, 1, { reason: 'harder wanted', approvalId: id(99) }, at)
    expect(judgeRun(kept, kit)).toMatchObject({ mayGoOn: true, needsCorrection: false })
    expect(kept.corrections[0]).toMatchObject({ cause: 'reactive-too-much', accepted: false, reason: 'harder wanted', approvalId: id(99) })
    expect(kept.approvals).toEqual([id(99)])
  })
})

describe('the draft that is sent', () => {
  it('is one that the server takes, the weighing at hand included', () => {
    const body = draftOf({ ...read(pour(begin(), '877.1'), '12', 1000), seq: 3 }, new Date(at).toISOString(), 250)
    const parsed = DraftBody.parse(body)
    expect(parsed.components.map(({ index, pours }) => [index, pours.map(({ grams }) => grams)])).toEqual([[0, ['877.1']], [1, ['12']]])
    expect(parsed.reactiveAt).toBe('2026-11-17T08:00:01.000Z')
  })

  it('says why a mix was stopped', () => {
    const run = stopRun(read(begin(), '100'), { at: new Date(at).toISOString(), reason: 'Spilled', disposal: 'paint waste' })
    expect(DraftBody.parse(draftOf({ ...run, seq: 1 }, new Date(at).toISOString(), null)).stopped?.reason).toBe('Spilled')
    expect(poursOf(run)).toHaveLength(1)
  })
})

describe('a tare', () => {
  it.each([['', false], ['5', false], ['5.1', true], ['1000', true]])('asks with %j g on the scale: %s', (grams, asks) => {
    const run = begin()
    expect(asksBeforeTare({ ...run, reading: { ...run.reading, grams } })).toBe(asks)
  })
})
