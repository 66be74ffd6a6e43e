import type { DraftHolder, DraftInput } from '../schemas/drafts'
import { poursOf } from './bench-run'
import type { BenchRun } from './bench-run'

/** What a draft has in fields of its own; the rest of a run is the bench's own state. */
const FACTS = [
  'id', 'planId', 'potNumber', 'potCount', 'seq', 'mixRevisionId', 'jobStepId', 'purpose', 'pieceIds', 'mixedByUserId', 'plan', 'corrections', 'reactiveAt',
  'deviceReactiveAt', 'climate', 'viscosity', 'approvals', 'stopped', 'code', 'potLife',
] as const satisfies readonly (keyof BenchRun)[]

/** What only a bench needs to go on at the same gram. */
export type BenchOwnState = Omit<BenchRun, typeof FACTS[number]>

function ownStateOf(run: BenchRun): Record<string, unknown> {
  const facts: ReadonlySet<string> = new Set(FACTS)
  return Object.fromEntries(Object.entries(run).filter(([key]) => !facts.has(key)))
}

/**
 * A draft as it is sent: the facts, and the bench's own state for a tablet that takes it over.
 *
 * @param offsetMs the server's clock less the tablet's, null while it was never measured
 * @param holder the tablet that sends it
 */
export function draftOf(run: BenchRun, sentAt: string, offsetMs: number | null, holder: DraftHolder | null = null): DraftInput {
  return {
    seq: run.seq,
    code: run.code ?? undefined,
    planId: run.planId,
    potNumber: run.potNumber,
    potCount: run.potCount,
    mixRevisionId: run.mixRevisionId,
    jobStepId: run.jobStepId,
    purpose: run.purpose,
    pieceIds: run.pieceIds,
    boothId: run.tools.boothId,
    gunId: run.tools.gunId,
    scaleId: run.tools.scaleId,
    mixedByUserId: run.mixedByUserId,
    plan: run.plan,
    components: componentsOf(run),
    corrections: run.corrections,
    reactiveAt: run.reactiveAt,
    device: { reactiveAt: run.deviceReactiveAt, sentAt, offsetMs },
    climate: run.climate,
    viscosity: run.viscosity,
    approvals: run.approvals,
    stopped: run.stopped,
    holder,
    bench: ownStateOf(run),
  }
}

function componentsOf(run: BenchRun): NonNullable<DraftInput['components']> {
  const pours = poursOf(run)
  return [...new Set(pours.map(({ index }) => index))].sort((a, b) => a - b).map(index => ({
    index,
    pours: pours
      .filter(pour => pour.index === index)
      .map(({ lotId, grams, at, source, round }) => ({ lotId, grams, at, source, round })),
  }))
}
