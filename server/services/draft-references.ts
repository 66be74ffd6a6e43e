import type { Knex } from 'knex'
import type { DraftBody } from '#shared/schemas/drafts'
import { countPiecesOf, findJobStep, findPlaces, type JobStep, type ScaleRecord } from '../repositories/draft-references'
import { findStockLots, type StockLot } from '../repositories/lot-stock'
import { findMixRevision, type MixRevision } from '../repositories/mix-revisions'
import { invalid, type FieldFault } from '../utils/errors'

/** What a draft refers to, read once. */
export interface DraftReferences {
  revision: MixRevision
  jobStep: JobStep | null
  scale: ScaleRecord | null
  /** By id; a lot that is named but unknown is missing. */
  lots: Map<string, StockLot>
  /** The shop's IANA time zone. */
  zone: string
}

/**
 * @param held the draft's lots, where they were read already
 * @throws Refusal 400 naming every reference that leads nowhere
 */
export async function readReferences(body: DraftBody, db: Knex | Knex.Transaction, held?: DraftReferences['lots']): Promise<DraftReferences> {
  const faults: FieldFault[] = []
  const missing = (path: string, message: string) => void faults.push({ path, message })
  const revision = await findMixRevision(body.mixRevisionId, db)
  if (!revision) missing('mixRevisionId', 'There is no such mix.')
  const { scaleId, boothId, gunId, mixedByUserId: userId } = body
  const { scale, hasBooth, hasGun, hasUser, zone } = await findPlaces({ scaleId, boothId, gunId, userId }, db)
  if (scaleId !== null && !scale) missing('scaleId', 'There is no such scale.')
  if (boothId !== null && !hasBooth) missing('boothId', 'There is no such booth.')
  if (gunId !== null && !hasGun) missing('gunId', 'There is no such gun.')
  if (!hasUser) missing('mixedByUserId', 'There is no such person.')
  const jobStep = await readJobStep(body, revision, missing, db)
  if (!revision || faults.length > 0) throw invalid(faults)
  const lots = held ?? await findStockLots(lotIdsOf(body), db)
  return { revision, jobStep, scale, lots, zone }
}

/** Every lot named in a draft, once. */
export const lotIdsOf = (body: Pick<DraftBody, 'components'>): string[] =>
  [...new Set(body.components.flatMap(({ pours }) => pours.map(({ lotId }) => lotId)))].sort()

async function readJobStep(
  body: DraftBody, revision: MixRevision | null, missing: (path: string, message: string) => void, db: Knex | Knex.Transaction,
): Promise<JobStep | null> {
  if (body.jobStepId === null) {
    if (body.pieceIds.length > 0) missing('pieceIds', 'Pieces belong to a step of a job.')
    return null
  }
  const jobStep = await findJobStep(body.jobStepId, db)
  if (!jobStep) {
    missing('jobStepId', 'There is no such step.')
    return null
  }
  if (revision && jobStep.mixId !== null && jobStep.mixId !== revision.mixId) missing('mixRevisionId', 'This step of the job asks for another mix.')
  if (body.pieceIds.length > 0 && (await countPiecesOf(jobStep.jobId, body.pieceIds, db)) < body.pieceIds.length) {
    missing('pieceIds', 'One of these pieces is not of this job.')
  }
  return jobStep
}
