import * as z from 'zod/mini'
import { BatchState } from './batch-states'
import { WorkingLine } from './common'
import { DraftCorrection, DraftHolder, DraftPlan, PotLife, pourSources } from './drafts'
import { Cursor, DateText, DecimalText, Flag, GramsText, InstantText, Limit, Uuid, words } from './fields'

/** Why a foreman should look at a batch: what is in the cup is kept as a fact. */
export const reviewCodes = [
  'out-of-tolerance', 'not-complete', 'not-mixed-in-order', 'expired-lot', 'blocked-lot', 'late-entry', 'clock-ahead',
  'booth-clash',
] as const
export type ReviewCode = (typeof reviewCodes)[number]

/** What a component does in a mix. */
const roles = ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide'] as const
const verdicts = ['short', 'in-tolerance', 'too-much', 'cannot-tell'] as const

/** Body of `POST /api/batches`: seals the draft of that id into the record. */
export const BatchCreateBody = z.strictObject({
  draftId: Uuid,
  /** The tablet that asks; a draft that another one has taken over is not sealed by it. */
  holder: z._default(z.nullable(DraftHolder), null),
})
export type BatchCreateBody = z.infer<typeof BatchCreateBody>
/** As it is written: what has a default may be left out. */
export type BatchCreateInput = z.input<typeof BatchCreateBody>

export const BatchParams = z.strictObject({ id: Uuid })

/** Filters of `GET /api/batches`; they combine. Days are the shop's. */
export const BatchListQuery = z.strictObject({
  jobId: z.optional(Uuid),
  /** Any component's material. */
  materialId: z.optional(Uuid),
  lotId: z.optional(Uuid),
  /** The maker's batch number on the tin, or how it begins. */
  lot: z.optional(z.string().check(z.trim(), z.minLength(1, 'Give a lot number.'), z.maxLength(60, 'A lot number has at most 60 characters.'))),
  state: z.optional(BatchState),
  mixedBy: z.optional(Uuid),
  boothId: z.optional(Uuid),
  from: z.optional(DateText),
  /** The last day that counts. */
  to: z.optional(DateText),
  /** Only out of tolerance, corrected, stopped or used late. */
  deviations: z.optional(Flag),
  /** Only what waits for a foreman (`true`), or what does not. */
  review: z.optional(Flag),
  cursor: z.optional(Cursor),
  limit: Limit,
})
export type BatchListQuery = z.infer<typeof BatchListQuery>

/** Filters of `GET /api/batches/export.csv`: those of the log, without pages. */
export const BatchExportQuery = z.omit(BatchListQuery, { cursor: true, limit: true })
export type BatchExportQuery = z.infer<typeof BatchExportQuery>

const named = {
  id: Uuid,
  code: z.string(),
  outcome: z.enum(['mixed', 'stopped']),
  state: BatchState,
  potNumber: z.int(),
  potCount: z.int(),
  mixCode: z.string(),
  mixName: z.string(),
  mixRevisionNumber: z.int(),
  jobId: z.nullable(Uuid),
  jobCode: z.nullable(z.string()),
  jobTitle: z.nullable(z.string()),
  stepTitle: z.nullable(z.string()),
  purpose: z.nullable(z.string()),
  boothId: z.nullable(Uuid),
  boothName: z.nullable(z.string()),
  gunId: z.nullable(Uuid),
  gunName: z.nullable(z.string()),
  mixedByUserId: Uuid,
  mixedByName: z.string(),
  mixedByInitials: z.string(),
  mixedAt: InstantText,
  sealedAt: InstantText,
  targetTotalG: GramsText,
  pouredTotalG: GramsText,
  reactiveAt: z.nullable(InstantText),
  lateAt: z.nullable(InstantText),
  endsAt: z.nullable(InstantText),
  firstSprayAt: z.nullable(InstantText),
  lastSprayAt: z.nullable(InstantText),
  closedAt: z.nullable(InstantText),
  leftoverG: z.nullable(GramsText),
  /** False: emptied, but the leftover was not weighed. Null: not emptied yet. */
  leftoverWeighed: z.nullable(z.boolean()),
  disposal: z.nullable(z.string()),
  /** By the last spray: `in-time`, `late` (after the late limit) or `past-life`. Null: not noted, or no pot life. */
  used: z.nullable(z.enum(['in-time', 'late', 'past-life'])),
  worstDeviationPct: z.nullable(DecimalText),
  outOfTolerance: z.boolean(),
  corrected: z.boolean(),
  reviewOpen: z.boolean(),
  amended: z.boolean(),
}

/** One line of the log. */
export const BatchListItem = z.strictObject({
  ...named,
  /** Code of the base's material. */
  baseCode: z.string(),
  /** The component whose ratio is furthest off. */
  worstRole: z.nullable(z.enum(roles)),
})
export type BatchListItem = z.infer<typeof BatchListItem>

export const BatchList = z.strictObject({ items: z.array(BatchListItem), nextCursor: z.nullable(z.string()) })
export type BatchList = z.infer<typeof BatchList>

const BatchPour = z.strictObject({
  /** Its place among the weighings of the component, from 0. */
  position: z.int(),
  lotId: Uuid,
  lotNumber: z.string(),
  grams: GramsText,
  at: InstantText,
  source: z.enum(pourSources),
  round: z.int(),
})

/** One component as meant and as poured. */
export const BatchComponent = z.strictObject({
  index: z.int(),
  role: z.enum(roles),
  materialId: Uuid,
  materialCode: z.string(),
  materialName: z.string(),
  parts: DecimalText,
  /** As planned, before the base was in. */
  plannedG: GramsText,
  /** Follows the base as poured. */
  targetG: GramsText,
  pouredG: GramsText,
  deviationPct: z.nullable(DecimalText),
  verdict: z.nullable(z.enum(verdicts)),
  pours: z.array(BatchPour),
})
export type BatchComponent = z.infer<typeof BatchComponent>

const batchEventKinds = ['first-spray', 'last-spray', 'emptied', 'review-settled', 'note', 'gun-flushed'] as const

const BatchEvent = z.strictObject({
  id: Uuid,
  kind: z.enum(batchEventKinds),
  at: InstantText,
  userName: z.nullable(z.string()),
  deviceName: z.nullable(z.string()),
  gunName: z.nullable(z.string()),
  boothName: z.nullable(z.string()),
  details: z.record(z.string(), z.unknown()),
})

const BatchAmendment = z.strictObject({
  id: Uuid,
  field: z.string(),
  from: z.nullable(z.string()),
  to: z.nullable(z.string()),
  /** Names where `from` and `to` are ids; else the same. */
  fromName: z.nullable(z.string()),
  toName: z.nullable(z.string()),
  reason: z.string(),
  userName: z.string(),
  approvedByName: z.nullable(z.string()),
  at: InstantText,
})

/** Answer of `POST /api/batches`, `GET /api/batches/:id` and of everything done to a batch. */
export const Batch = z.strictObject({
  ...named,
  /** Grows with each change of what the batch is now. */
  version: z.int(),
  planId: Uuid,
  mixId: Uuid,
  mixRevisionId: Uuid,
  jobStepId: z.nullable(Uuid),
  scaleId: z.nullable(Uuid),
  scaleName: z.nullable(z.string()),
  deviceName: z.nullable(z.string()),
  review: z.array(z.enum(reviewCodes)),
  /** Those that nobody settled yet. */
  openReview: z.array(z.enum(reviewCodes)),
  note: z.nullable(z.string()),
  areaM2: z.nullable(DecimalText),
  filmWeightGsm: z.nullable(DecimalText),
  filmWeightIs: z.nullable(z.enum(['deposited', 'sprayed'])),
  coats: z.nullable(z.int()),
  transferEfficiencyPct: z.nullable(DecimalText),
  components: z.array(BatchComponent),
  potLife: PotLife,
  containsIsocyanates: z.boolean(),
  chemistry: z.nullable(z.string()),
  climate: z.nullable(z.strictObject({
    airC: z.nullable(DecimalText), rhPct: z.nullable(DecimalText), surfaceC: z.nullable(DecimalText),
  })),
  viscosity: z.nullable(z.strictObject({
    cup: z.nullable(z.string()), seconds: z.nullable(DecimalText), materialC: z.nullable(DecimalText),
  })),
  plan: DraftPlan,
  corrections: z.array(DraftCorrection),
  stopped: z.nullable(z.strictObject({ at: InstantText, reason: z.string(), disposal: z.string() })),
  /** Every sum behind the figures, as reckoned when the batch was sealed. */
  working: z.array(WorkingLine),
  engineVersion: z.string(),
  pieces: z.array(z.strictObject({
    id: Uuid, position: z.int(), label: z.string(), quantity: z.int(), areaM2: DecimalText, rack: z.nullable(z.string()),
  })),
  events: z.array(BatchEvent),
  amendments: z.array(BatchAmendment),
  /** Coats that this batch was sprayed for, with the windows they opened. */
  applications: z.array(z.strictObject({
    id: Uuid,
    firstAt: InstantText,
    lastAt: InstantText,
    /** Nobody noted the first spray: the earliest that it can have been. */
    firstAssumed: z.boolean(),
    /** Nobody noted the last spray: the latest that it can have been. */
    lastAssumed: z.boolean(),
    opensAt: z.nullable(InstantText),
    closingAt: z.nullable(InstantText),
    closesAt: z.nullable(InstantText),
  })),
})
export type Batch = z.infer<typeof Batch>

/** Body of `POST /api/batches/:id/review`: a foreman has looked at these, and says what came of it. */
export const BatchReviewBody = z.strictObject({
  codes: z.array(z.enum(reviewCodes)).check(z.minLength(1, 'Say what is settled.'), z.maxLength(reviewCodes.length)),
  reason: words(400),
})
export type BatchReviewBody = z.infer<typeof BatchReviewBody>

const choice = { id: Uuid, name: z.string() }

/** Answer of `GET /api/batches/facets`: what the log can be narrowed by. */
export const BatchFacets = z.strictObject({
  jobs: z.array(z.strictObject({ ...choice, code: z.string() })),
  materials: z.array(z.strictObject({ ...choice, code: z.string() })),
  people: z.array(z.strictObject(choice)),
  booths: z.array(z.strictObject(choice)),
  guns: z.array(z.strictObject(choice)),
  /** Batches that wait for a foreman; at most 1000 are counted. */
  reviewOpen: z.int(),
})
export type BatchFacets = z.infer<typeof BatchFacets>

/** Body of `POST /api/batches/:id/events`. Without `at` it happened now, without `gunId` by the gun that was planned. */
export const BatchEventBody = z.strictObject({
  kind: z.enum(['first-spray', 'last-spray', 'gun-flushed']),
  gunId: z._default(z.nullable(Uuid), null),
  at: z._default(z.nullable(InstantText), null),
})
export type BatchEventBody = z.infer<typeof BatchEventBody>

/**
 * Body of `POST /api/batches/:id/close`. `leftoverG` null: there is some, but nobody weighed it. `lastSprayAt` tells the
 * last spray where it was not noted; left out, emptying is the latest that it can have been. `sprayed` false: not a gram
 * of it was sprayed.
 */
export const BatchCloseBody = z.strictObject({
  leftoverG: z.nullable(GramsText),
  at: z._default(z.nullable(InstantText), null),
  disposal: z.optional(words(60)),
  lastSprayAt: z.optional(z.nullable(InstantText)),
  sprayed: z.optional(z.boolean()),
})
export type BatchCloseBody = z.infer<typeof BatchCloseBody>
