import type { Knex } from 'knex'
import { D, sum } from '#shared/engine/decimal'
import type { BenchStep } from '#shared/schemas/bench'
import { listPieceFacts, listStepFacts, listTreatments, type PieceFacts, type StepFacts, type Treatment } from '../repositories/bench-steps'
import { listMixedPots, type MixedPot } from '../repositories/mixed-pots'
import { findWindows, type OpenWindow } from '../repositories/windows'
import { stateOf } from './windows'

/** What the readiness of a shop's coats follows from, at `now` (epoch milliseconds). */
export interface BenchFacts {
  now: number
  /** First instant of the shop's day, epoch milliseconds. */
  dayStart: number
  steps: StepFacts[]
  pieces: PieceFacts[]
  treatments: Treatment[]
  windows: OpenWindow[]
  pots: MixedPot[]
}

/** Reads the facts in one transaction's view. */
export async function readBenchFacts(moment: { now: number; today: string; dayStart: number }, trx: Knex.Transaction): Promise<BenchFacts> {
  const steps = await listStepFacts(moment.today, trx)
  const jobIds = [...new Set(steps.map(({ jobId }) => jobId))]
  return {
    now: moment.now,
    dayStart: moment.dayStart,
    steps,
    pieces: await listPieceFacts(jobIds, trx),
    treatments: await listTreatments(jobIds, trx),
    windows: await findWindows({ jobIds }, trx),
    pots: await listMixedPots(jobIds, trx),
  }
}

/** The facts of one job, with its treatments found by step and piece. */
interface JobFacts extends Omit<BenchFacts, 'treatments'> {
  treatments: Map<string, Treatment>
}

const treatmentKey = (jobStepId: string, pieceId: string) => `${jobStepId}:${pieceId}`

type Verdict = Pick<BenchStep, 'ready' | 'reason' | 'until'>

interface JudgedPiece {
  piece: PieceFacts
  verdict: Verdict
  /** Pots for this piece in this step. */
  pots: MixedPot[]
  coatsLeft: number
  /** It could be coated, and all its coats are mixed or being mixed. */
  isMixed: boolean
}

/** Which verdict speaks for a step whose pieces differ: what can be done first, then what comes soonest. */
const loudest = ['ready', 'mixing', 'wait', 'sand', 'held', 'done'] as const

/**
 * The coats that stand next, one row a step: each piece's next coat is the first that it has not got, and it may be
 * sprayed when nothing before it is left to do and its window is open.
 */
export function benchSteps(facts: BenchFacts): BenchStep[] {
  const treatments = new Map(facts.treatments.map((treatment) => [treatmentKey(treatment.jobStepId, treatment.pieceId), treatment]))
  const jobIds = [...new Set(facts.steps.map(({ jobId }) => jobId))]
  return jobIds.flatMap((jobId) => stepsOfJob({
    now: facts.now,
    dayStart: facts.dayStart,
    steps: facts.steps.filter((step) => step.jobId === jobId),
    pieces: facts.pieces.filter((piece) => piece.jobId === jobId),
    windows: facts.windows.filter((window) => window.jobId === jobId),
    pots: facts.pots,
    treatments,
  }))
}

function stepsOfJob(facts: JobFacts): BenchStep[] {
  const byStep = new Map<string, JudgedPiece[]>()
  for (const piece of facts.pieces) {
    for (const { step, verdict } of judgePiece(piece, facts)) {
      byStep.set(step.id, [...(byStep.get(step.id) ?? []), withPots(step, piece, verdict, facts)])
    }
  }
  return facts.steps.flatMap((step) => {
    const judged = byStep.get(step.id)
    return judged ? [toBenchStep(step, judged)] : []
  })
}

/** What is mixed for a piece already, and what that leaves of its verdict: nothing has to be mixed twice. */
function withPots(step: StepFacts, piece: PieceFacts, verdict: Verdict, facts: JobFacts): JudgedPiece {
  const pots = facts.pots.filter(({ jobStepId, pieceIds }) => jobStepId === step.id && (pieceIds.length === 0 || pieceIds.includes(piece.id)))
  const coatsLeft = Math.max(0, step.coats - Math.max(coatsMixed(pots), treatment(step, piece, facts)?.times ?? 0))
  if (verdict.ready !== 'ready' || coatsLeft > 0) return { piece, verdict, pots, coatsLeft, isMixed: false }
  const ready = pots.some(({ state }) => state !== 'over') ? 'mixing' : 'done'
  return { piece, verdict: { ready, reason: null, until: null }, pots, coatsLeft, isMixed: true }
}

/** Pots of one plan lay the same coats, so that a plan counts once for a piece. */
function coatsMixed(pots: readonly MixedPot[]): number {
  const byPlan = new Map<string, number>()
  for (const { planId, coats } of pots) byPlan.set(planId, Math.max(byPlan.get(planId) ?? 0, coats))
  return [...byPlan.values()].reduce((all, coats) => all + coats, 0)
}

/** The piece's next coat, and the coat that it got today. */
function judgePiece(piece: PieceFacts, facts: JobFacts): { step: StepFacts; verdict: Verdict }[] {
  const coats = facts.steps.filter((step) => step.kind === 'coat')
  const next = coats.find((step) => !isCoated(step, piece, facts))
  const today = coats.filter((step) => step !== next && (treatment(step, piece, facts)?.lastAt ?? 0) >= facts.dayStart)
  const done = today.map((step) => ({ step, verdict: { ready: 'done', reason: null, until: null } as const }))
  return next ? [...done, { step: next, verdict: judge(next, piece, facts) }] : done
}

function judge(step: StepFacts, piece: PieceFacts, facts: JobFacts): Verdict {
  if (step.jobHeld) return { ready: 'held', reason: 'The job is held.', until: null }
  if (piece.heldReason !== null) return { ready: 'held', reason: `Held: ${piece.heldReason}`, until: null }
  const before = facts.steps.find((other) => other.position < step.position && isLeftToDo(other, piece, facts))
  if (before) return { ready: before.kind === 'sand' ? 'sand' : 'wait', reason: `First: ${before.title}`, until: null }
  const windows = facts.windows.filter((window) => window.stepPosition <= step.position && window.pieceIds.includes(piece.id))
  return windows.reduce<Verdict>((verdict, window) => worse(verdict, judgeWindow(window, facts.now)), { ready: 'ready', reason: null, until: null })
}

function judgeWindow(window: OpenWindow, now: number): Verdict {
  const state = stateOf(window, now)
  if (state === 'missed') return { ready: 'sand', reason: `The window after ${window.stepTitle} is over: sand first.`, until: window.closesAt }
  if (state === 'too-early') return { ready: 'wait', reason: `Too early after ${window.stepTitle}.`, until: window.opensAt }
  return { ready: 'ready', reason: null, until: window.closesAt }
}

/** Of two windows over one piece the one that forbids more: missed, then the later opening, then the earlier closing. */
function worse(one: Verdict, other: Verdict): Verdict {
  const rank = ['ready', 'wait', 'sand']
  const difference = rank.indexOf(one.ready) - rank.indexOf(other.ready)
  if (difference !== 0) return difference > 0 ? one : other
  if (one.until === null || other.until === null) return one.until === null ? other : one
  const laterFirst = one.ready === 'wait'
  return (one.until > other.until) === laterFirst ? one : other
}

const treatment = (step: StepFacts, piece: PieceFacts, facts: JobFacts) =>
  facts.treatments.get(treatmentKey(step.id, piece.id))

const isCoated = (step: StepFacts, piece: PieceFacts, facts: JobFacts) =>
  step.state === 'done' || (treatment(step, piece, facts)?.times ?? 0) >= step.coats

/** Waiting is told by windows, so that a step that only waits never stands in the way itself. */
function isLeftToDo(step: StepFacts, piece: PieceFacts, facts: JobFacts): boolean {
  if (step.kind === 'coat' || step.kind === 'wait' || step.state === 'done') return false
  return treatment(step, piece, facts) === undefined
}

function toBenchStep(step: StepFacts, judged: JudgedPiece[]): BenchStep {
  const ready = loudest.find((word) => judged.some(({ verdict }) => verdict.ready === word)) ?? 'done'
  const speaking = judged.filter(({ verdict }) => verdict.ready === ready)
  const shown = judged.filter(({ verdict, isMixed }) => verdict.ready === ready || verdict.ready === 'held' || isMixed)
  const toMix = speaking.filter(({ piece, coatsLeft }) => piece.heldReason === null && coatsLeft > 0)
  const { id: jobStepId, position: stepPosition, title: stepTitle, jobId, jobCode, jobTitle } = step
  const { mixId, mixRevisionId, filmWeightGsm, filmWeightIs, coats, gunShape, boothId, gunId } = step
  return {
    jobStepId, jobId, jobCode, jobTitle, stepPosition, stepTitle, mixId, mixRevisionId, filmWeightGsm, filmWeightIs, coats, gunShape, boothId, gunId,
    pieces: shown.map(({ piece: { id, label, areaM2, quantity, faces, rack, heldReason }, coatsLeft }) =>
      ({ id, label, areaM2, quantity, faces, rack, heldReason, coatsLeft })),
    areaM2: sum(toMix.map(({ piece }) => new D(piece.areaM2))).toString(),
    ...(ofPots(ready, speaking) ?? speaking.map(({ verdict }) => verdict).reduce(soonest)),
  }
}

/** What the pots say where they decide: who is mixing, what stands mixed, or that all is mixed. */
function ofPots(ready: Verdict['ready'], speaking: readonly JudgedPiece[]): Verdict | null {
  if (ready === 'ready') return null
  const pots = [...new Set(speaking.filter(({ isMixed }) => isMixed || ready !== 'done').flatMap((one) => one.pots))]
  const draft = pots.find(({ state }) => state === 'mixing')
  if (draft) return { ready: 'mixing', reason: `${draft.code} is being mixed by ${draft.mixedByName}.`, until: null }
  const codes = (of: readonly MixedPot[]) => of.map(({ code }) => code).join(', ')
  if (ready === 'mixing') return { ready, reason: `Mixed, to be sprayed: ${codes(pots.filter(({ state }) => state === 'standing'))}.`, until: null }
  return ready === 'done' && pots.length > 0 ? { ready, reason: `All pieces are mixed: ${codes(pots)}.`, until: null } : null
}

/** Of equal verdicts the one whose instant comes first; one with an instant says more than one without. */
function soonest(one: Verdict, other: Verdict): Verdict {
  if (one.until === null || other.until === null) return one.until === null ? other : one
  return other.until < one.until ? other : one
}
