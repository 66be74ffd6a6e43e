import { describe, expect, it } from 'vitest'
import type { PieceFacts, StepFacts } from '../../../server/repositories/bench-steps'
import type { MixedPot } from '../../../server/repositories/mixed-pots'
import type { OpenWindow } from '../../../server/repositories/windows'
import { benchSteps, type BenchFacts } from '../../../server/services/bench-steps'

const now = Date.parse('2026-11-17T10:00:00.000Z')
const iso = (minutes: number) => new Date(now + minutes * 60_000).toISOString()

const step = (id: string, position: number, more: Partial<StepFacts> = {}): StepFacts => ({
  id, jobId: 'job', jobCode: 'J-0001', jobTitle: 'Fronts', jobHeld: false, position, kind: 'coat', title: id, state: 'to-come', mixId: 'mix', mixRevisionId: 'r1',
  filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, gunShape: 'flat', boothId: null, gunId: null, ...more,
})
const piece = (id: string, more: Partial<PieceFacts> = {}): PieceFacts =>
  ({ id, jobId: 'job', label: id, areaM2: '0.4', quantity: 1, faces: 'front', rack: null, heldReason: null, ...more })
const window = (pieceIds: string[], opens: number, closes: number | null, more: Partial<OpenWindow> = {}): OpenWindow => ({
  id: `w${pieceIds.join('')}`, jobId: 'job', jobCode: 'J-0001', jobTitle: 'Fronts', jobStepId: 'seal', stepTitle: 'Seal', stepPosition: 2, pieces: pieceIds, pieceIds,
  boothId: null, boothName: null, firstAt: iso(-300), lastAt: iso(-290), opensAt: iso(opens), closingAt: null, closesAt: closes === null ? null : iso(closes), assumed: false, unended: null, ...more,
})
const treated = (jobStepId: string, pieceIds: string[], minutesAgo = 290, times = 1) =>
  pieceIds.map((pieceId) => ({ jobStepId, pieceId, times, lastAt: now - minutesAgo * 60_000 }))

const shop = (more: Partial<BenchFacts> = {}): BenchFacts => ({
  now, dayStart: now - 10 * 3_600_000, pots: [], windows: [], treatments: [], pieces: [piece('a'), piece('b', { areaM2: '0.6' })],
  steps: [step('sand-wood', 1, { kind: 'sand', title: 'Sand P150', state: 'done' }), step('seal', 2), step('top', 3)], ...more,
})
const pot = (code: string, pieceIds: string[], more: Partial<MixedPot> = {}): MixedPot =>
  ({ code, planId: code, jobStepId: 'seal', pieceIds, coats: 1, mixedByName: 'Ada', state: 'standing', ...more })
const rows = (facts: BenchFacts) => benchSteps(facts).map(({ jobStepId, ready, reason, areaM2, pieces }) =>
  ({ jobStepId, ready, reason, areaM2, pieces: pieces.map(({ id }) => id) }))

describe('the bench\'s list', () => {
  it('offers the first coat that the pieces have not got, with its area', () => {
    expect(rows(shop())).toEqual([{ jobStepId: 'seal', ready: 'ready', reason: null, areaM2: '1', pieces: ['a', 'b'] }])
  })

  it('waits for what comes before, and says what', () => {
    const steps = [step('sand-wood', 1, { kind: 'sand', title: 'Sand P150' }), step('seal', 2)]
    expect(rows(shop({ steps }))).toMatchObject([{ ready: 'sand', reason: 'First: Sand P150' }])
    expect(rows(shop({ steps, treatments: treated('sand-wood', ['a']) }))).toMatchObject([{ jobStepId: 'seal', ready: 'ready', pieces: ['a'], areaM2: '0.4' }])
  })

  it('waits until the window opens, goes while it is open, and asks for sanding when it is over', () => {
    const coated = { treatments: treated('seal', ['a', 'b'], 1_000) }
    const verdict = (opens: number, closes: number | null) => benchSteps(shop({ ...coated, windows: [window(['a', 'b'], opens, closes)] }))
    expect(verdict(30, 600)).toMatchObject([{ jobStepId: 'top', ready: 'wait', until: iso(30) }])
    expect(verdict(-30, 600)).toMatchObject([{ jobStepId: 'top', ready: 'ready', reason: null, until: iso(600) }])
    expect(verdict(-30, null)).toMatchObject([{ ready: 'ready', until: null }])
    expect(verdict(-30, 0)).toMatchObject([{ ready: 'sand', until: iso(0) }])
  })

  it('offers the pieces that can go when others must wait', () => {
    const windows = [window(['a'], -5, 500), window(['b'], 20, 500)]
    expect(rows(shop({ windows, treatments: treated('seal', ['a', 'b'], 1_000) }))).toEqual([{ jobStepId: 'top', ready: 'ready', reason: null, areaM2: '0.4', pieces: ['a'] }])
  })

  it('tells the soonest opening when all must wait', () => {
    const windows = [window(['a'], 40, 500), window(['b'], 20, 500)]
    expect(benchSteps(shop({ windows, treatments: treated('seal', ['a', 'b'], 1_000) }))).toMatchObject([{ ready: 'wait', until: iso(20) }])
  })

  it('shows a step of two coats until both are on', () => {
    const steps = [step('seal', 2, { coats: 2 }), step('top', 3)]
    expect(rows(shop({ steps, treatments: treated('seal', ['a', 'b'], 1_000) }))).toMatchObject([{ jobStepId: 'seal', ready: 'ready' }])
    expect(rows(shop({ steps, treatments: treated('seal', ['a', 'b'], 1_000, 2) }))).toMatchObject([{ jobStepId: 'top' }])
  })

  it('shows what was coated today as done beside what comes next', () => {
    expect(rows(shop({ treatments: treated('seal', ['a', 'b']) }))).toMatchObject([{ jobStepId: 'seal', ready: 'done' }, { jobStepId: 'top', ready: 'ready' }])
  })

  it('leaves held pieces out of the area and names the reason when all are held', () => {
    const held = piece('b', { heldReason: 'Dent' })
    expect(rows(shop({ pieces: [piece('a'), held] }))).toMatchObject([{ ready: 'ready', areaM2: '0.4', pieces: ['a', 'b'] }])
    expect(rows(shop({ pieces: [held] }))).toMatchObject([{ ready: 'held', reason: 'Held: Dent', areaM2: '0' }])
    expect(rows(shop({ steps: [step('seal', 2, { jobHeld: true })] }))).toMatchObject([{ ready: 'held', reason: 'The job is held.' }])
  })

  it('says who is mixing for it', () => {
    const pots = [pot('B-0042', [], { state: 'mixing' })]
    expect(rows(shop({ pots }))).toMatchObject([{ ready: 'mixing', reason: 'B-0042 is being mixed by Ada.', areaM2: '0' }])
    expect(rows(shop({ pots, steps: [step('sand-wood', 1, { kind: 'sand', title: 'Sand P150' }), step('seal', 2)] })))
      .toMatchObject([{ ready: 'mixing', reason: 'B-0042 is being mixed by Ada.' }])
  })

  it('has nothing for a job whose coats are all on', () => {
    expect(rows(shop({ treatments: [...treated('seal', ['a', 'b'], 3_000), ...treated('top', ['a', 'b'], 2_000)] }))).toEqual([])
  })
})

describe('what is mixed already', () => {
  const left = (facts: BenchFacts) => benchSteps(facts).map(({ ready, areaM2, pieces }) => [ready, areaM2, pieces.map(({ id, coatsLeft }) => `${id} ${coatsLeft}`).join()])

  it('leaves the pieces that no pot was mixed for', () => {
    expect(left(shop({ pots: [pot('B-1', ['a'])] }))).toEqual([['ready', '0.6', 'a 0,b 1']])
    expect(left(shop({ pots: [pot('B-1', ['a'], { state: 'mixing' })] }))).toEqual([['ready', '0.6', 'a 0,b 1']])
    expect(left(shop({ pots: [pot('B-1', ['a', 'b'], { jobStepId: 'top' })] }))).toEqual([['ready', '1', 'a 1,b 1']])
  })

  it('names the pots that stand mixed, and says when the last of them is over', () => {
    const told = (...states: MixedPot['state'][]) => benchSteps(shop({ pots: states.map((state, index) => pot(`B-${index + 1}`, [index === 0 ? 'a' : 'b'], { state })) }))
    expect(told('standing', 'standing')).toMatchObject([{ ready: 'mixing', reason: 'Mixed, to be sprayed: B-1, B-2.', areaM2: '0' }])
    expect(told('over', 'standing')).toMatchObject([{ ready: 'mixing', reason: 'Mixed, to be sprayed: B-2.' }])
    expect(told('over', 'over')).toMatchObject([{ ready: 'done', reason: 'All pieces are mixed: B-1, B-2.', until: null }])
  })

  it('counts the coats of each pot, and those of one plan once', () => {
    const steps = [step('seal', 2, { coats: 2 })]
    expect(left(shop({ steps, pots: [pot('B-1', ['a', 'b'])] }))).toEqual([['ready', '1', 'a 1,b 1']])
    expect(left(shop({ steps, pots: [pot('B-1', ['a']), pot('B-2', ['a'])] }))).toEqual([['ready', '0.6', 'a 0,b 2']])
    expect(left(shop({ steps, pots: [pot('B-1', [], { planId: 'plan' }), pot('B-2', [], { planId: 'plan' })] }))).toEqual([['ready', '1', 'a 1,b 1']])
    expect(left(shop({ steps, pots: [pot('B-1', [], { coats: 2 })] }))).toEqual([['mixing', '0', 'a 0,b 0']])
  })

  it('takes off what was sprayed, with or without a pot of it', () => {
    const steps = [step('seal', 2, { coats: 3 })]
    const treatments = treated('seal', ['a'], 1_000, 2)
    expect(left(shop({ steps, treatments }))).toEqual([['ready', '1', 'a 1,b 3']])
    expect(left(shop({ steps, treatments, pots: [pot('B-1', ['a'], { coats: 2, state: 'over' })] }))).toEqual([['ready', '1', 'a 1,b 3']])
  })

  it('goes on to what waits when the rest is mixed and over', () => {
    const facts = { windows: [window(['b'], 20, 500)], treatments: treated('seal', ['a', 'b'], 1_000) }
    const pots = (state: MixedPot['state']) => [pot('B-1', ['a'], { jobStepId: 'top', state })]
    expect(left(shop({ ...facts, pots: pots('standing') }))).toEqual([['mixing', '0', 'a 0']])
    expect(left(shop({ ...facts, pots: pots('over') }))).toEqual([['wait', '0.6', 'a 0,b 1']])
  })
})
