import { D, print, sum } from '../engine/decimal'
import { readMix } from '../engine/mix'
import { calculatePour } from '../engine/pour'
import type { PourAnswer, PourComponent } from '../engine/pour'
import type { Verdict } from '../engine/verdict'
import type { WorkingLine } from '../engine/working'
import { componentAtHand, isLastStep, pouredG, walkStep, weighingG } from './bench-run'
import type { BenchRun } from './bench-run'
import type { BenchPart, BenchTools } from './bench-tools'
import { toIso } from './instant'

/** The weighing at hand: what to pour of it now, counted from the last walk through the cup. Grams. */
export interface BenchWeighing {
  index: number
  part: BenchPart
  /** More of a component that is in already, as a correction asks. */
  isTopUp: boolean
  /** Thinner within its range, after everything was in: from nothing up to the high end. */
  isThinning: boolean
  targetG: string
  lowG: string
  highG: string
  readingG: string
  toGoG: string
  verdict: Verdict | null
  deviationPct: string | null
  /** Above the target; below it negative. */
  offG: string
}

export interface BenchJudgement {
  answer: PourAnswer
  weighing: BenchWeighing | null
  /** The way to the next component is free. */
  mayGoOn: boolean
  /** The correction sheet stands open. */
  needsCorrection: boolean
  /** More base than planned: nothing to correct, the others follow it. */
  baseLeads: boolean
}

/** Judges the cup as it stands. @throws EngineError for a reading that is no number */
export function judgeRun(run: BenchRun, tools: BenchTools): BenchJudgement {
  const answer = calculatePour({
    mix: tools.input,
    scaleDivisionG: tools.scale.divisionG,
    scaleMpeG: tools.scale.mpeG ?? undefined,
    targetTotalG: run.targetTotalG,
    poured: tools.parts.flatMap(({ index }) => {
      const grams = pouredG(run, index)
      return grams === null ? [] : [{ index, pouredG: grams }]
    }),
    cupCapacityG: tools.limitG ?? undefined,
    kept: run.kept,
  }, { scale: { capacityG: tools.scale.capacityG } })
  const weighing = weighingOf(run, tools, answer)
  const baseIndex = readMix(tools.input).baseIndex
  const baseLeads = weighing !== null && weighing.index === baseIndex && weighing.verdict === 'too-much' && answer.fits
  const settled = weighing !== null && isSettled(run, weighing)
  const mayGoOn = walkStep(run)?.kind === 'stir' || (run.reading.steady && (settled || baseLeads))
  const culprit = weighing?.verdict === 'too-much' && weighing.index !== baseIndex
  return {
    answer,
    weighing,
    needsCorrection: run.reading.steady && answer.correctionNeeded && (culprit || (settled && isLastStep(run))),
    mayGoOn: mayGoOn && !(run.reading.steady && answer.correctionNeeded && settled && isLastStep(run)),
    baseLeads,
  }
}

function isSettled(run: BenchRun, { index, verdict }: BenchWeighing): boolean {
  return verdict === 'in-tolerance' || run.kept.includes(index) || (verdict === 'cannot-tell' && run.accepted.includes(index))
}

function weighingOf(run: BenchRun, tools: BenchTools, answer: PourAnswer): BenchWeighing | null {
  const index = componentAtHand(run)
  const part = index === null ? undefined : tools.parts[index]
  const judged = index === null ? undefined : answer.components[index]
  if (index === null || part === undefined || judged === undefined) return null
  const readingG = weighingG(run)
  const before = earlierG(run, index)
  const less = (grams: string): string => print(D.max(0, new D(grams).minus(before)))
  const targetG = less(judged.targetG)
  return {
    index,
    part,
    isTopUp: before.gt(0),
    isThinning: run.pouredAt !== null && part.role === 'thinner' && targetG === '0',
    targetG,
    lowG: less(judged.lowG),
    highG: less(judged.highG),
    readingG,
    toGoG: print(D.max(0, new D(targetG).minus(readingG))),
    verdict: judged.verdict,
    deviationPct: judged.deviationPct,
    offG: print(new D(readingG).minus(targetG)),
  }
}

/** Grams of a component that earlier rounds put in. */
function earlierG(run: BenchRun, index: number): InstanceType<typeof D> {
  const step = walkStep(run)
  const round = step?.kind === 'pour' ? step.round : 0
  return sum(run.pours.filter(pour => pour.index === index && pour.round !== round).map(({ grams }) => new D(grams)))
}

/** What a correction asks of one component: add, pour or leave. Grams. */
interface CorrectionLine {
  index: number
  part: BenchPart
  inCupG: string
  newTargetG: string
  addG: string
  doThis: 'add' | 'pour' | 'leave'
}

export function correctionLines(tools: BenchTools, answer: PourAnswer): CorrectionLine[] {
  return tools.parts.flatMap((part) => {
    const judged = answer.components[part.index]
    if (judged === undefined) return []
    const add = new D(judged.addG)
    return [{
      index: part.index,
      part,
      inCupG: judged.pouredG ?? '0',
      newTargetG: judged.newTargetG,
      addG: judged.addG,
      doThis: add.lte(0) ? 'leave' : judged.pouredG === null ? 'pour' : 'add',
    }]
  })
}

/** The sum behind each new target: most of what was poured over its parts leads, the others follow it. */
export function correctionWorking(tools: BenchTools, answer: PourAnswer, kept: readonly number[]): WorkingLine[] {
  const mix = readMix(tools.input)
  const lead = leader(tools, answer, kept)
  if (lead === null) return []
  return mix.components.map(({ index, name, weightParts }) => ({
    what: name,
    formula: `${lead.grams} g × ${print(weightParts)} ÷ ${print(lead.weightParts)}, on the scale's division`,
    value: answer.components[index]?.newTargetG ?? '0',
    unit: 'g',
  }))
}

interface Leader {
  grams: string
  weightParts: ReturnType<typeof readMix>['totalWeightParts']
}

/** The poured component furthest ahead of its parts; what was kept leads nothing. */
function leader(tools: BenchTools, answer: PourAnswer, kept: readonly number[]): Leader | null {
  const mix = readMix(tools.input)
  return mix.components.reduce<Leader | null>((most, { index, weightParts }) => {
    const grams = answer.components[index]?.pouredG ?? null
    if (grams === null || kept.includes(index)) return most
    if (most === null) return { grams, weightParts }
    return new D(grams).times(most.weightParts).gt(new D(most.grams).times(weightParts)) ? { grams, weightParts } : most
  }, null)
}

/** The offer taken: the total grows, what is short of it is poured again in the order of the mix. */
export function acceptCorrection(run: BenchRun, tools: BenchTools, answer: PourAnswer, at: number): BenchRun {
  const lead = leader(tools, answer, run.kept)
  const index = componentAtHand(run)
  if (lead === null || index === null) return run
  const round = 1 + Math.max(...run.walk.map(step => (step.kind === 'pour' ? step.round : 0)))
  const done = run.walk.slice(0, run.place + 1)
  const again = done.flatMap((step) => {
    const judged = step.kind === 'pour' && step.round === 0 ? answer.components[step.index] : undefined
    return step.kind === 'pour' && judged !== undefined && new D(judged.addG).gt(0) ? [{ ...step, round }] : []
  })
  const total = answer.cause === 'short-at-end'
    ? run.targetTotalG
    : print(new D(lead.grams).times(readMix(tools.input).totalWeightParts).div(lead.weightParts))
  return {
    ...run,
    targetTotalG: total,
    walk: [...done, ...again, ...run.walk.slice(run.place + 1)],
    corrections: [...run.corrections, entry(answer, at, { accepted: true, reason: null, approvalId: null })],
  }
}

/** Kept as poured, with the reason and, past the limit, a foreman's word. Nothing else grows to meet it. */
export function keepAsPoured(
  run: BenchRun, answer: PourAnswer, index: number, word: { reason: string, approvalId: string | null }, at: number,
): BenchRun {
  return {
    ...run,
    kept: [...new Set([...run.kept, index])],
    corrections: [...run.corrections, entry(answer, at, { accepted: false, ...word })],
    approvals: word.approvalId === null ? run.approvals : [...run.approvals, word.approvalId],
  }
}

function entry(
  answer: PourAnswer, at: number, word: { accepted: boolean, reason: string | null, approvalId: string | null },
): BenchRun['corrections'][number] {
  return { at: toIso(at), cause: answer.cause ?? 'reactive-too-much', newTargets: answer.components.map(({ newTargetG }) => newTargetG), ...word }
}

/** The component that is too much, by its place in the mix. Never the base: the others follow it. */
export function culpritOf(tools: BenchTools, answer: PourAnswer, kept: readonly number[]): number | null {
  const { baseIndex } = readMix(tools.input)
  const found = answer.components.findIndex(({ verdict }, index) => verdict === 'too-much' && index !== baseIndex && !kept.includes(index))
  return found < 0 ? null : found
}

/** How the target of a component comes about, for opening its grams. */
export function targetWorking(tools: BenchTools, run: BenchRun, index: number, judged: PourComponent): WorkingLine[] {
  const mix = readMix(tools.input)
  const base = mix.components[mix.baseIndex]
  const component = mix.components[index]
  if (base === undefined || component === undefined) return []
  const baseG = index === mix.baseIndex ? null : pouredG(run, mix.baseIndex)
  const target = baseG === null
    ? `${run.targetTotalG} g × ${print(component.weightParts)} ÷ ${print(mix.totalWeightParts)}`
    : `${baseG} g × ${print(component.weightParts)} ÷ ${print(base.weightParts)}`
  return [
    { what: baseG === null ? 'target, as planned' : `target, from the ${base.name} as poured`, formula: `${target}, to the nearest ${tools.scale.divisionG} g`, value: judged.targetG, unit: 'g' },
    { what: 'least allowed', formula: `${judged.targetG} g − ${print(component.tolerancePct)} %`, value: judged.lowG, unit: 'g' },
    { what: 'most allowed', formula: `${judged.targetG} g + ${print(component.tolerancePct)} %`, value: judged.highG, unit: 'g' },
    { what: 'what the scale can show', formula: '± half a division and its own error', value: judged.uncertaintyG, unit: 'g' },
  ]
}
