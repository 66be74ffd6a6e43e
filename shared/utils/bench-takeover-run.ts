import * as z from 'zod/mini'
import { planBatch } from '../engine/batch'
import { pouringOrder } from '../engine/chemistry'
import { D, print, sum } from '../engine/decimal'
import { readMix } from '../engine/mix'
import type { BenchSnapshot } from '../schemas/bench'
import type { Draft } from '../schemas/drafts'
import type { BenchOwnState } from './bench-draft'
import { NO_READING } from './bench-run'
import type { BenchPour, BenchRun } from './bench-run'
import { benchTools } from './bench-tools'
import type { BenchTools } from './bench-tools'

/** As much of the sending bench's state as has to be there; what else it carries travels along. */
const OwnState = z.looseObject({
  stage: z.enum(['stir', 'pour', 'stand', 'label', 'logged']),
  tools: z.looseObject({ mixId: z.string(), scaleId: z.string(), cupId: z.string() }),
  walk: z.array(z.looseObject({ kind: z.enum(['pour', 'stir']) })),
  place: z.int(),
  pours: z.array(z.looseObject({ index: z.int(), grams: z.string() })),
  reading: z.looseObject({ grams: z.string(), steady: z.boolean() }),
  taredG: z.string(),
  targetTotalG: z.string(),
  lots: z.array(z.nullable(z.string())),
})

/**
 * A batch begun at another tablet as this one goes on with it: at the same gram where that tablet sent its own state,
 * else at the last weighing that the facts show.
 *
 * @param userId who goes on with it here
 * @returns null where this bench does not know the mix's revision or has nothing to weigh it with
 */
export function runOfDraft(draft: Draft, snapshot: BenchSnapshot, userId: string): BenchRun | null {
  const own = ownState(draft) ?? stateFromFacts(draft, snapshot)
  if (own === null || benchTools({ ...own.tools, revisionId: draft.mixRevisionId }, snapshot) === null) return null
  const {
    id, planId, potNumber, potCount, seq, mixRevisionId, jobStepId, purpose, pieceIds, plan, corrections, reactiveAt, climate, viscosity, approvals, stopped, code, potLife, device,
  } = draft
  return {
    ...own,
    id, planId, potNumber, potCount, seq, mixRevisionId, jobStepId, purpose, pieceIds, plan, corrections, reactiveAt, climate, viscosity, approvals, stopped, code, potLife,
    // Ids of the approvals stay with the draft; the moment as this tablet's clock would show it is not known.
    deviceReactiveAt: device?.reactiveAt ?? null,
    mixedByUserId: userId,
  }
}

function ownState(draft: Draft): BenchOwnState | null {
  if (draft.bench === null) return null
  const read = z.safeParse(OwnState, draft.bench)
  return read.success ? read.data as unknown as BenchOwnState : null
}

/** From what was poured alone: the last weighing stands open, so that whoever goes on settles it. */
function stateFromFacts(draft: Draft, snapshot: BenchSnapshot): BenchOwnState | null {
  const tools = toolsOf(draft, snapshot)
  if (tools === null) return null
  const pours = draft.components.flatMap(({ index, pours: ofOne }) => ofOne.map(pour => ({ ...pour, index })))
    .sort((a, b) => a.at.localeCompare(b.at) || a.round - b.round)
  const last = pours.at(-1)
  const walk = walkOf(tools, pours)
  return {
    stage: last === undefined ? 'stir' : 'pour',
    tools: { mixId: tools.mix.id, scaleId: tools.scale.id, cupId: tools.cup.id, gunId: tools.gun?.id ?? null, boothId: draft.boothId },
    span: null,
    targetTotalG: planBatch({ ...draft.plan, mix: tools.input }, { scale: { capacityG: tools.scale.capacityG } }).exactTotalG,
    walk,
    place: last === undefined ? 0 : Math.max(0, walk.findIndex(step => step.kind === 'pour' && step.index === last.index && step.round === last.round)),
    pours: pours.slice(0, -1),
    reading: last === undefined ? NO_READING : { grams: weighedWith(last, pours), steady: true, at: last.at, source: last.source === 'bridge' ? 'scale' : last.source, fellFrom: null },
    taredG: '0',
    lift: null,
    byHand: false,
    lots: tools.parts.map(({ index }) => pours.filter(pour => pour.index === index).at(-1)?.lotId ?? null),
    kept: [],
    accepted: [],
    pouredAt: null,
    stirredAt: null,
    viscosityAt: null,
  } as BenchOwnState
}

function toolsOf(draft: Draft, snapshot: BenchSnapshot): BenchTools | null {
  const mix = [...snapshot.mixes, ...snapshot.heldMixes ?? []].find(({ revisionId }) => revisionId === draft.mixRevisionId)
  const scale = snapshot.scales.find(({ id }) => id === draft.scaleId) ?? snapshot.scales[0]
  const cup = snapshot.cups.at(-1)
  if (!mix || !scale || !cup) return null
  return benchTools({ mixId: mix.id, revisionId: mix.revisionId, scaleId: scale.id, cupId: cup.id, gunId: draft.gunId, boothId: draft.boothId }, snapshot)
}

/** The safe order, with what corrections added behind the step that they followed. */
function walkOf(tools: BenchTools, pours: readonly BenchPour[]): BenchRun['walk'] {
  const first: BenchRun['walk'] = pouringOrder(readMix(tools.input)).map(step => (step.kind === 'pour' ? { ...step, round: 0 } : step))
  const added = pours.filter(({ round }) => round > 0)
    .filter((pour, place, all) => all.findIndex(({ index, round }) => index === pour.index && round === pour.round) === place)
    .map(({ index, round }) => ({ kind: 'pour' as const, index, round }))
  const untilPoured = 1 + first.reduce((most, step, place) => (step.kind === 'pour' && pours.some(({ index }) => index === step.index) ? place : most), -1)
  return [...first.slice(0, untilPoured), ...added, ...first.slice(untilPoured)]
}

/** Grams of the whole weighing, all its tins. */
const weighedWith = (last: BenchPour, pours: readonly BenchPour[]): string =>
  print(sum(pours.filter(({ index, round }) => index === last.index && round === last.round).map(({ grams }) => new D(grams))))
