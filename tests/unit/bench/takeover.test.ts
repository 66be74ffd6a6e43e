import { describe, expect, it } from 'vitest'
import { DraftBody, type Draft } from '#shared/schemas/drafts'
import { draftOf } from '#shared/utils/bench-draft'
import { judgeRun } from '#shared/utils/bench-judge'
import { reckon } from '#shared/utils/bench-reckon'
import { baseStirred, inCupG, nextStep, startRun, takeReading, type BenchRun } from '#shared/utils/bench-run'
import { isTakenOver, mayGoOn } from '#shared/utils/bench-takeover'
import { runOfDraft } from '#shared/utils/bench-takeover-run'
import { id, setup, snapshot, tools } from './shop'

const at = Date.parse('2026-11-17T08:00:00.000Z')
const kit = tools()
const holder = { id: id(95), turn: 0 }

function begin(): BenchRun {
  const [pot] = reckon(setup({ areaM2: '6.7' }), snapshot()).pots
  if (pot === undefined) throw new Error('no pot')
  const run = startRun({ id: id(90), planId: id(91), pot, potCount: 1, tools: kit, jobStepId: null, purpose: 'sample', mixedByUserId: id(92), lots: [id(21), id(24), id(25)] })
  return { ...run, seq: 3, code: 'B-0421', approvals: [id(96)] }
}
const read = (run: BenchRun, grams: string, ms: number): BenchRun =>
  takeReading(run, { grams, steady: true, at: at + ms }, 'typed', { at: at + ms, deviceAt: at + ms }, kit)

/** The draft as the server would answer it. */
function stored(run: BenchRun, more: Partial<Draft> = {}): Draft {
  const body = DraftBody.parse(draftOf(run, new Date(at).toISOString(), 0, holder))
  return { ...body, id: run.id, code: 'B-0421', state: 'open', potLife: null, notes: [], createdAt: '', updatedAt: '', ...more }
}

const inPour = (): BenchRun => read(nextStep(read(baseStirred(begin()), '877.1', 1000), at + 1000), '400', 60_000)

describe('a batch that goes on at another tablet', () => {
  it('stands at the same gram, with the same step, tins and targets', () => {
    const run = inPour()
    const there = runOfDraft(stored(run), snapshot(), id(92))
    expect(there).toEqual(run)
    expect(there && judgeRun(there, kit).weighing?.readingG).toBe('400')
  })

  it('is the one\'s who goes on with it', () => {
    expect(runOfDraft(stored(inPour()), snapshot(), id(93))?.mixedByUserId).toBe(id(93))
  })

  it('keeps what the server has corrected', () => {
    const moved = runOfDraft(stored(inPour(), { reactiveAt: '2026-11-17T07:59:00.000Z' }), snapshot(), id(92))
    expect(moved?.reactiveAt).toBe('2026-11-17T07:59:00.000Z')
  })

  it('goes on from the facts alone where no bench sent its state', () => {
    const run = inPour()
    const there = runOfDraft(stored(run, { bench: null }), snapshot(), id(92))
    expect(there).toMatchObject({ stage: 'pour', place: 1, lots: [id(21), id(24), null] })
    expect(there && inCupG(there)).toBe('1277.1')
    const judged = there && judgeRun(there, kit)
    expect(judged?.weighing).toMatchObject({ index: 1, readingG: '400', verdict: 'short', targetG: '438.6' })
  })

  it('begins with stirring where nothing was poured yet', () => {
    expect(runOfDraft(stored(begin(), { bench: null }), snapshot(), id(92))).toMatchObject({ stage: 'stir', place: 0, pours: [] })
  })

  it('sums two tins of one weighing', () => {
    const draft = stored(inPour(), { bench: null })
    const [base] = draft.components
    const two = { ...draft, components: [{ index: 0, pours: [{ ...base!.pours[0]!, grams: '500' }, { ...base!.pours[0]!, lotId: id(22), grams: '377.1', at: '2026-11-17T08:00:02.000Z' }] }] }
    const there = runOfDraft(two, snapshot(), id(92))
    expect(there && inCupG(there)).toBe('877.1')
    expect(there?.lots[0]).toBe(id(22))
  })

  it('is not gone on with where its mix is not known, nor with a state that is none', () => {
    expect(runOfDraft(stored(inPour(), { bench: null, mixRevisionId: id(99) }), snapshot(), id(92))).toBeNull()
    expect(runOfDraft(stored(inPour(), { bench: { stage: 'nonsense' } }), snapshot(), id(92))).toMatchObject({ stage: 'pour' })
    expect(runOfDraft(stored(inPour()), snapshot({ mixes: [] }), id(92))).toBeNull()
  })
})

describe('who holds a batch', () => {
  it('is another tablet once its turn is higher, or the same with another name', () => {
    expect(isTakenOver({ holder }, holder)).toBe(false)
    expect(isTakenOver({ holder: { id: id(97), turn: 1 } }, holder)).toBe(true)
    expect(isTakenOver({ holder: { id: id(97), turn: 0 } }, holder)).toBe(true)
    expect(isTakenOver({ holder: null }, holder)).toBe(false)
    expect(isTakenOver({ holder }, { ...holder, turn: 2 })).toBe(false)
  })

  it('may be the mixer and a senior anywhere, another sprayer at a bench only', () => {
    const draft = { mixedByUserId: id(92) }
    expect(mayGoOn(draft, { userId: id(92), role: 'sprayer', isBench: false })).toBe(true)
    expect(mayGoOn(draft, { userId: id(93), role: 'sprayer', isBench: false })).toBe(false)
    expect(mayGoOn(draft, { userId: id(93), role: 'sprayer', isBench: true })).toBe(true)
    expect(mayGoOn(draft, { userId: id(93), role: 'foreman', isBench: false })).toBe(true)
  })
})
