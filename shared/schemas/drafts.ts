import * as z from 'zod/mini'
import { CelsiusText, DecimalText, GramsText, InstantText, PercentText, SignedGramsText, Uuid, words } from './fields'

/** How a weight reached the log. */
export const pourSources = ['typed', 'scale', 'simulated', 'bridge'] as const

/** One weighing out of one tin. */
const DraftPour = z.strictObject({
  lotId: Uuid,
  /** Grams poured; the rule refuses what is below nothing. */
  grams: SignedGramsText,
  at: InstantText,
  source: z.enum(pourSources),
  /** 0: the pour as planned; 1 and on: what a correction added. */
  round: z.int().check(z.minimum(0), z.maximum(50)),
})

/** What is in the cup of one component of the mix; `index` is its place in the mix revision, from 0. */
const DraftComponent = z.strictObject({
  index: z.int().check(z.minimum(0), z.maximum(7)),
  pours: z.array(DraftPour).check(z.maxLength(40)),
})

/** A correction that was offered and what became of it. */
export const DraftCorrection = z.strictObject({
  at: InstantText,
  /** The engine's cause, for example `reactive-too-much`. */
  cause: z.string().check(z.regex(/^[a-z][a-z-]{0,39}$/, 'Name the cause.')),
  accepted: z.boolean(),
  /** Grams a component in the mix's order. */
  newTargets: z.array(GramsText).check(z.maxLength(8)),
  reason: z._default(z.nullable(words(400)), null),
  approvalId: z._default(z.nullable(Uuid), null),
})

const DraftPlanComponent = z.strictObject({
  name: words(120),
  parts: DecimalText,
  partsMax: z.optional(DecimalText),
  sheetMaxParts: z.optional(DecimalText),
  densityGPerMl: z.optional(DecimalText),
  role: z.optional(z.enum(['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide'])),
  tolerancePct: z.optional(DecimalText),
  reactive: z.optional(z.boolean()),
})

/**
 * What was asked of the arithmetic: the inputs of `POST /api/calculations/batch`.
 * The mix may be left out: the revision's own counts. Where it is given, each component's parts must lie in the
 * revision's range, so that a thinner set by viscosity keeps its figure.
 */
export const DraftPlan = z.strictObject({
  mix: z.optional(z.strictObject({
    basis: z.enum(['weight', 'volume']),
    components: z.array(DraftPlanComponent).check(z.minLength(1), z.maxLength(8)),
  })),
  areaM2: z.optional(DecimalText),
  totalG: z.optional(DecimalText),
  available: z.optional(z.strictObject({ index: z.int().check(z.minimum(0), z.maximum(7)), grams: DecimalText })),
  filmWeightGsm: z.optional(DecimalText),
  filmWeightIs: z.optional(z.enum(['deposited', 'sprayed'])),
  coats: z.optional(z.int().check(z.minimum(1), z.maximum(50))),
  transferEfficiencyPct: z.optional(DecimalText),
  reserveG: z.optional(DecimalText),
  reservePct: z.optional(DecimalText),
  scaleDivisionG: GramsText,
  scaleMpeG: z.optional(GramsText),
})
export type DraftPlan = z.infer<typeof DraftPlan>

/**
 * The tablet that a batch is being made at. `turn` grows by one with each taking over, so that a tablet that was taken
 * over from is known even when it writes later.
 */
export const DraftHolder = z.strictObject({ id: Uuid, turn: z.int().check(z.minimum(0), z.maximum(1_000_000)) })
export type DraftHolder = z.infer<typeof DraftHolder>

/** The bench's own state of a batch may be so long, in characters of JSON. */
const longestBenchState = 60_000

/** Body of `PUT /api/batch-drafts/:id`: a batch being made. The id is the batch's own, made by the client. */
export const DraftBody = z.strictObject({
  /** Counts the client's steps; a lower or equal number than the stored one changes nothing. */
  seq: z.int().check(z.minimum(1), z.maximum(1_000_000_000)),
  /** Of the bench's own block of numbers; left out, the series gives the code. Once given it stays. */
  code: z.optional(z.string().check(z.regex(/^B-\d{4,9}$/, 'Give a code like B-0421.'))),
  planId: Uuid,
  potNumber: z.int().check(z.minimum(1), z.maximum(999)),
  potCount: z.int().check(z.minimum(1), z.maximum(999)),
  mixRevisionId: Uuid,
  jobStepId: z._default(z.nullable(Uuid), null),
  /** What a loose mix is for; needed where there is no job step. */
  purpose: z._default(z.nullable(words(200)), null),
  pieceIds: z._default(z.array(Uuid).check(z.maxLength(500)), []),
  boothId: z._default(z.nullable(Uuid), null),
  gunId: z._default(z.nullable(Uuid), null),
  scaleId: z._default(z.nullable(Uuid), null),
  mixedByUserId: Uuid,
  plan: DraftPlan,
  components: z._default(z.array(DraftComponent).check(z.maxLength(8)), []),
  corrections: z._default(z.array(DraftCorrection).check(z.maxLength(40)), []),
  /** First stable gram at which a reactive component and another are together; starts the pot's timers. */
  reactiveAt: z._default(z.nullable(InstantText), null),
  /** The tablet's own reading of that moment and its clock against the server's (server − tablet). */
  device: z._default(z.nullable(z.strictObject({
    reactiveAt: z.nullable(InstantText),
    sentAt: InstantText,
    offsetMs: z.nullable(z.int().check(z.minimum(-4_000_000_000_000), z.maximum(4_000_000_000_000))),
  })), null),
  climate: z._default(z.nullable(z.strictObject({
    airC: CelsiusText,
    rhPct: PercentText,
    surfaceC: z._default(z.nullable(CelsiusText), null),
  })), null),
  viscosity: z._default(z.nullable(z.strictObject({
    cup: z.string().check(z.trim(), z.minLength(1), z.maxLength(12)),
    seconds: z.string().check(z.regex(/^\d{1,4}(?:\.\d{1,2})?$/, 'Give seconds with at most two decimals.')),
    materialC: z._default(z.nullable(CelsiusText), null),
  })), null),
  /** Null where the client is no bench: then anybody may go on with it. */
  holder: z._default(z.nullable(DraftHolder), null),
  /** What a bench needs beside the facts to go on at the same gram: step, tins, what was tared. Nothing follows from it here. */
  bench: z._default(z.nullable(z.record(z.string().check(z.maxLength(40)), z.unknown()).check(
    z.refine(state => JSON.stringify(state).length <= longestBenchState, 'The bench sends too much of its own state.'),
  )), null),
  approvals: z._default(z.array(Uuid).check(z.maxLength(20)), []),
  /** The mix was stopped: sealing records it as stopped and what is in the cup as waste. */
  stopped: z._default(z.nullable(z.strictObject({
    at: InstantText,
    reason: words(400),
    /** Where it is not named, the chemistry of what is in the cup decides when it is sealed. */
    disposal: z._default(z.string().check(z.trim(), z.maxLength(60)), ''),
  })), null),
}).check(
  z.refine(({ potNumber, potCount }) => potNumber <= potCount, { path: ['potNumber'], error: 'There are not so many pots.' }),
  z.refine(({ jobStepId, purpose }) => jobStepId !== null || purpose !== null, {
    path: ['purpose'], error: 'Say what the loose mix is for.',
  }),
  z.refine(({ components }) => new Set(components.map(({ index }) => index)).size === components.length, {
    path: ['components'], error: 'Give each component once.',
  }),
  z.refine(({ pieceIds }) => new Set(pieceIds).size === pieceIds.length, { path: ['pieceIds'], error: 'Give each piece once.' }),
)
export type DraftBody = z.infer<typeof DraftBody>
/** As it is written: what has a default may be left out. */
export type DraftInput = z.input<typeof DraftBody>

export const DraftParams = z.strictObject({ id: Uuid })

/** Body of `POST /api/batch-drafts/:id/discard`: why a mix into whose cup nothing came is given up. */
export const DraftDiscardBody = z.strictObject({ reason: words(400), holder: z.optional(z.nullable(DraftHolder)) })
export type DraftDiscardBody = z.infer<typeof DraftDiscardBody>

const potLifeBases = ['sheet', 'table', 'held', 'rule'] as const

/** The instants of a pot's life, or null where nothing in the cup reacts (yet). */
export const PotLife = z.nullable(z.strictObject({
  startsAt: InstantText,
  lateAt: InstantText,
  endsAt: InstantText,
  basis: z.enum(potLifeBases),
  potLifeMin: DecimalText,
}))
export type PotLife = z.infer<typeof PotLife>

const draftStates = ['open', 'sealed', 'stopped', 'discarded'] as const

/**
 * What the server saw or changed. `clock-ahead`: the moment lay up to 2 min in the future and was set to now;
 * `clock-far-ahead`: more than that; `late-entry`: older than 7 days; `taken-over`: another person went on with it.
 */
const draftNotes = ['clock-ahead', 'clock-far-ahead', 'late-entry', 'taken-over'] as const
export type DraftNote = (typeof draftNotes)[number]

/** Answer of `PUT` and `GET /api/batch-drafts/:id`: the body as stored, with what the server knows of it. */
export const Draft = z.strictObject({
  ...DraftBody.shape,
  id: Uuid,
  code: z.string(),
  state: z.enum(draftStates),
  /** By the server's clock; `device` keeps the tablet's. */
  reactiveAt: z.nullable(InstantText),
  potLife: PotLife,
  notes: z.array(z.enum(draftNotes)),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Draft = z.infer<typeof Draft>

export const DraftListQuery = z.strictObject({
  state: z._default(z.enum(['open']), 'open'),
  boothId: z.optional(Uuid),
})
export type DraftListQuery = z.infer<typeof DraftListQuery>

/** One line of what is being mixed, for taking over at another tablet. */
export const DraftSummary = z.strictObject({
  id: Uuid,
  code: z.string(),
  seq: z.int(),
  potNumber: z.int(),
  potCount: z.int(),
  mixCode: z.string(),
  mixName: z.string(),
  jobCode: z.nullable(z.string()),
  jobTitle: z.nullable(z.string()),
  stepTitle: z.nullable(z.string()),
  purpose: z.nullable(z.string()),
  boothId: z.nullable(Uuid),
  mixedByUserId: Uuid,
  mixedByName: z.string(),
  /** The bench that it was last written at; null where that is none. */
  deviceName: z.nullable(z.string()),
  holder: z.nullable(DraftHolder),
  reactiveAt: z.nullable(InstantText),
  updatedAt: InstantText,
})
export type DraftSummary = z.infer<typeof DraftSummary>

export const DraftList = z.strictObject({ items: z.array(DraftSummary), nextCursor: z.nullable(z.string()) })
export type DraftList = z.infer<typeof DraftList>
