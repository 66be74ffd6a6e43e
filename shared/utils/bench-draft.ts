import type { DraftInput } from '../schemas/drafts'
import { poursOf } from './bench-run'
import type { BenchRun } from './bench-run'

/** A draft as it is sent; `offsetMs` is the server's clock less the tablet's, null while it was never measured. */
export function draftOf(run: BenchRun, sentAt: string, offsetMs: number | null): DraftInput {
  return {
    seq: run.seq,
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
