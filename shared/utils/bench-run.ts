import { pouringOrder } from '../engine/chemistry'
import type { PouringStep } from '../engine/chemistry'
import { D, print, sum } from '../engine/decimal'
import { readMix } from '../engine/mix'
import { potLifeStart } from '../engine/pot-life'
import type { DraftCorrection, DraftPlan, PotLife } from '../schemas/drafts'
import type * as z from 'zod/mini'
import type { BenchPot } from './bench-reckon'
import type { ScaleReading, ScaleSourceKind } from './bench-scale'
import type { BenchTools, ToolChoice } from './bench-tools'
import { toIso } from './instant'

type BenchStage = 'stir' | 'pour' | 'stand' | 'label' | 'logged'

/** One thing to do while pouring. `round` 0 is the pour as planned, 1 and on what a correction added. */
type BenchWalkStep = { kind: 'pour', index: number, round: number } | { kind: 'stir' }

/** One weighing that is done with. Grams a plain decimal, `at` ISO by the server's clock. */
export interface BenchPour {
  index: number
  round: number
  lotId: string
  grams: string
  at: string
  source: ScaleSourceKind
}

/** What the scale reads of the component at hand, since the last tare. */
interface BenchReading {
  grams: string
  steady: boolean
  /** ISO by the server's clock; null before the first reading. */
  at: string | null
  source: ScaleSourceKind
  /** On a scale that sees the cup: where a fall that has not ended began. */
  fellFrom: BenchWeight | null
}

/** Grams of the weighing at hand at a moment, ISO by the server's clock. */
export interface BenchWeight {
  grams: string
  at: string
}

/** The cup was taken off the scale. */
interface BenchLift extends BenchWeight {
  /** Back on the scale with other grams than it had: somebody has to say why. */
  backG: string | null
}

/** One cup being made, from the first stir to its place in the log. Everything in it is plain data. */
export interface BenchRun {
  /** The batch's own id. */
  id: string
  planId: string
  potNumber: number
  potCount: number
  /** Counts what was saved. */
  seq: number
  stage: BenchStage
  tools: ToolChoice
  mixRevisionId: string
  jobStepId: string | null
  purpose: string | null
  pieceIds: string[]
  span: BenchPot['span']
  mixedByUserId: string
  plan: DraftPlan
  /** Exact total that the targets come from; grows with a correction. */
  targetTotalG: string
  walk: BenchWalkStep[]
  place: number
  pours: BenchPour[]
  reading: BenchReading
  /** Grams of this weighing that were in before the last tare. */
  taredG: string
  /** The pour is paused while the cup is off the scale. */
  lift: BenchLift | null
  /** The scale was lost: the rest of this batch is typed. */
  byHand: boolean
  /** Lot in use of each component of the mix. */
  lots: (string | null)[]
  /** Components whose deviation was kept, and those accepted although the scale cannot tell. */
  kept: number[]
  accepted: number[]
  corrections: z.infer<typeof DraftCorrection>[]
  approvals: string[]
  /** Tins that a foreman has allowed for this batch, each with what was wrong with it. */
  allowed?: { lotId: string, fault: 'blocked' | 'out-of-date' }[]
  /** Lots in the cup of which somebody was told that they may no longer be poured. */
  told?: string[]
  reactiveAt: string | null
  /** The tablet's own reading of that moment. */
  deviceReactiveAt: string | null
  /** When everything was in, and when it was stirred and scraped. */
  pouredAt: string | null
  stirredAt: string | null
  climate: { airC: string, rhPct: string, surfaceC: string | null } | null
  viscosity: { cup: string, seconds: string, materialC: string | null } | null
  /** When the viscosity was noted. */
  viscosityAt: string | null
  stopped: { at: string, reason: string, disposal: string } | null
  /** What the server said of it; null until it has answered. */
  code: string | null
  potLife: PotLife
}

/** Nothing was read yet since the last tare. */
export const NO_READING: BenchReading = { grams: '', steady: false, at: null, source: 'typed', fellFrom: null }

/** Begins one pot of a plan: stir the base first. */
export function startRun(input: {
  id: string
  planId: string
  pot: BenchPot
  potCount: number
  tools: BenchTools
  jobStepId: string | null
  purpose: string | null
  mixedByUserId: string
  lots: (string | null)[]
}): BenchRun {
  const { tools, pot } = input
  const { climate } = tools.booth ?? { climate: null }
  return {
    id: input.id,
    planId: input.planId,
    potNumber: pot.number,
    potCount: input.potCount,
    seq: 0,
    stage: 'stir',
    tools: { mixId: tools.mix.id, scaleId: tools.scale.id, cupId: tools.cup.id, gunId: tools.gun?.id ?? null, boothId: tools.booth?.id ?? null },
    mixRevisionId: tools.mix.revisionId,
    jobStepId: input.jobStepId,
    purpose: input.purpose,
    pieceIds: pot.pieceIds,
    span: pot.span,
    mixedByUserId: input.mixedByUserId,
    plan: pot.plan,
    targetTotalG: pot.batch.exactTotalG,
    walk: pouringOrder(readMix(tools.input)).map(firstRound),
    place: 0,
    pours: [],
    reading: NO_READING,
    taredG: '0',
    lift: null,
    byHand: false,
    lots: input.lots,
    kept: [],
    accepted: [],
    corrections: [],
    approvals: [],
    reactiveAt: null,
    deviceReactiveAt: null,
    pouredAt: null,
    stirredAt: null,
    climate: climate === null ? null : { airC: climate.airC, rhPct: climate.rhPct, surfaceC: climate.surfaceC },
    viscosity: null,
    viscosityAt: null,
    stopped: null,
    code: null,
    potLife: null,
  }
}

function firstRound(step: PouringStep): BenchWalkStep {
  return step.kind === 'pour' ? { ...step, round: 0 } : step
}

export function walkStep(run: BenchRun): BenchWalkStep | null {
  return run.walk[run.place] ?? null
}

/** The component at hand, by its place in the mix; null while stirring and after the last one. */
export function componentAtHand(run: BenchRun): number | null {
  const step = walkStep(run)
  return step?.kind === 'pour' ? step.index : null
}

export function isLastStep(run: BenchRun): boolean {
  return run.place >= run.walk.length - 1
}

/** Grams of the weighing at hand: what was in before the tare and what the scale reads now. */
export function weighingG(run: BenchRun): string {
  return print(new D(run.taredG).plus(gramsOf(run.reading)))
}

function gramsOf({ grams }: BenchReading): InstanceType<typeof D> {
  return new D(grams === '' ? '0' : grams)
}

function closedInStep(run: BenchRun): InstanceType<typeof D> {
  const step = walkStep(run)
  if (step?.kind !== 'pour') return new D(0)
  return sum(run.pours.filter(({ index, round }) => index === step.index && round === step.round).map(({ grams }) => new D(grams)))
}

/** The weighing at hand as an entry, less what earlier tins of it took; null while nothing of this tin is in. */
export function openPour(run: BenchRun): BenchPour | null {
  const step = walkStep(run)
  if (run.stage !== 'pour' || step?.kind !== 'pour') return null
  const lotId = run.lots[step.index] ?? null
  const grams = new D(weighingG(run)).minus(closedInStep(run))
  if (lotId === null || run.reading.at === null || grams.lte(0)) return null
  return { index: step.index, round: step.round, lotId, grams: print(grams), at: run.reading.at, source: run.reading.source }
}

/** Everything in the cup, the weighing at hand included. */
export function poursOf(run: BenchRun): BenchPour[] {
  const open = openPour(run)
  return open === null ? run.pours : [...run.pours, open]
}

/** Grams of a component in the cup; null while none of it was poured. */
export function pouredG(run: BenchRun, index: number): string | null {
  const pours = poursOf(run).filter(pour => pour.index === index)
  return pours.length === 0 ? null : print(sum(pours.map(({ grams }) => new D(grams))))
}

export function inCupG(run: BenchRun): string {
  return print(sum(poursOf(run).map(({ grams }) => new D(grams))))
}

/** The base is stirred: pouring begins. */
export const baseStirred = (run: BenchRun): BenchRun => ({ ...run, stage: 'pour' })

/** Where the tablet's clock and the server's stand: `at` by the server, `deviceAt` as the tablet shows it. Epoch ms. */
export interface BenchMoment {
  at: number
  deviceAt: number
}

/**
 * A reading of the scale. The first steady gram at which a reactive component and another are together starts the pot
 * life, even where the pour is stopped later.
 */
export function takeReading(run: BenchRun, reading: ScaleReading, source: ScaleSourceKind, moment: BenchMoment, tools: BenchTools): BenchRun {
  if (run.stage !== 'pour' || componentAtHand(run) === null) return run
  const next = { ...run, reading: { grams: reading.grams, steady: reading.steady, at: toIso(moment.at), source, fellFrom: null } }
  if (next.reactiveAt !== null || !reading.steady || tools.mix.potLifeMin === null && tools.mix.potLifeTable === null) return next
  const starts = potLifeStart(readMix(tools.input), poursOf(next).map(({ index, grams, at }) => ({ index, grams, at: Date.parse(at) })))
  return starts === null ? next : { ...next, reactiveAt: toIso(moment.at), deviceReactiveAt: toIso(moment.deviceAt) }
}

/** The weighing at hand is done: on to the next, or to stirring and standing after the last. */
export function nextStep(run: BenchRun, at: number): BenchRun {
  const open = openPour(run)
  const moved: BenchRun = {
    ...run,
    pours: open === null ? run.pours : [...run.pours, open],
    place: run.place + 1,
    reading: NO_READING,
    taredG: '0',
  }
  return moved.place < moved.walk.length ? moved : { ...moved, stage: 'stand', pouredAt: run.pouredAt ?? toIso(at) }
}

export function stirred(run: BenchRun, at: number): BenchRun {
  return { ...run, stirredAt: toIso(at) }
}

/** What was typed wrong is wiped; what earlier weighings put in stays. */
export function wipeReading(run: BenchRun): BenchRun {
  return { ...run, reading: { ...NO_READING, source: run.reading.source } }
}

export function acceptUndecided(run: BenchRun, index: number): BenchRun {
  return { ...run, accepted: [...new Set([...run.accepted, index])] }
}

export function stopRun(run: BenchRun, stopped: NonNullable<BenchRun['stopped']>): BenchRun {
  const open = openPour(run)
  return {
    ...run,
    pours: open === null ? run.pours : [...run.pours, open],
    reading: NO_READING,
    taredG: '0',
    stage: 'logged',
    stopped,
  }
}
