import * as z from 'zod/mini'
import { WorkingLine, namedHead, pageOf, pageQuery, searchText } from './common'
import { DecimalText, Flag, InstantText, Uuid } from './fields'
import { MixPart, PotLifeIs } from './mixes'

const stepKinds = ['prepare', 'coat', 'sand', 'wait', 'inspect'] as const
const StepKind = z.enum(stepKinds)

const facesOf = ['front', 'back', 'both', 'edges', 'all'] as const
export const Faces = z.enum(facesOf)
export type Faces = z.infer<typeof Faces>

export const ScheduleListQuery = z.strictObject({
  mixId: z.optional(Uuid),
  q: searchText,
  archived: z.optional(Flag),
  ...pageQuery,
})
export type ScheduleListQuery = z.infer<typeof ScheduleListQuery>

/** Another revision than the one in force. */
export const ScheduleQuery = z.strictObject({ revisionId: z.optional(Uuid) })
export type ScheduleQuery = z.infer<typeof ScheduleQuery>

const revisionState = z.enum(['draft', 'released', 'superseded'])

export const ScheduleItem = z.object({
  ...namedHead,
  /** The released revision; where none is, the latest draft. */
  revisionId: z.nullable(Uuid),
  revisionNumber: z.nullable(z.number()),
  revisionState: z.nullable(revisionState),
  releasedAt: z.nullable(InstantText),
  stepCount: z.number(),
  coatCount: z.number(),
  mixCodes: z.array(z.string()),
  /** Jobs planned or running by any revision. */
  openJobCount: z.number(),
})
export type ScheduleItem = z.infer<typeof ScheduleItem>
export const ScheduleList = pageOf(ScheduleItem)
export type ScheduleList = z.infer<typeof ScheduleList>

/** The mix of a step as it stands today. */
export const StepMix = z.object({
  id: Uuid,
  code: z.string(),
  name: z.string(),
  revisionId: z.nullable(Uuid),
  parts: z.array(MixPart),
  potLifeIs: PotLifeIs,
  potLifeMin: z.nullable(DecimalText),
  lateFromPct: z.nullable(DecimalText),
  inductionMin: z.nullable(DecimalText),
  containsIsocyanates: z.boolean(),
})
export type StepMix = z.infer<typeof StepMix>

/** One step of a schedule. Minutes and grams per square metre are decimals; what a kind does not have is null. */
export const ScheduleStep = z.object({
  id: Uuid,
  position: z.number(),
  kind: StepKind,
  title: z.string(),
  grit: z.nullable(z.string()),
  mix: z.nullable(StepMix),
  filmWeightMinGsm: z.nullable(DecimalText),
  filmWeightGsm: z.nullable(DecimalText),
  filmWeightMaxGsm: z.nullable(DecimalText),
  filmWeightIs: z.nullable(z.enum(['deposited', 'sprayed'])),
  coats: z.nullable(z.number()),
  passes: z.nullable(z.number()),
  faces: z.nullable(Faces),
  gunShape: z.nullable(z.enum(['flat', 'frames', 'sticks'])),
  maxPressureBar: z.nullable(DecimalText),
  coatIntervalMinMin: z.nullable(DecimalText),
  coatIntervalMaxMin: z.nullable(DecimalText),
  overcoatFromMin: z.nullable(DecimalText),
  overcoatUntilMin: z.nullable(DecimalText),
  sandFromMin: z.nullable(DecimalText),
  sandUntilMin: z.nullable(DecimalText),
  flashOffMin: z.nullable(DecimalText),
  dryMin: z.nullable(DecimalText),
  dryPlace: z.nullable(z.string()),
  dryAtC: z.nullable(DecimalText),
  layFlat: z.boolean(),
  doNotSand: z.boolean(),
  keepFromDraughts: z.boolean(),
  cautions: z.nullable(z.string()),
  instructions: z.nullable(z.string()),
  /** Film of one coat on the panel in µm; null where density or volume solids of the mix are not known. */
  wetFilmUm: z.nullable(DecimalText),
  dryFilmUm: z.nullable(DecimalText),
  filmWorking: z.array(WorkingLine),
})
export type ScheduleStep = z.infer<typeof ScheduleStep>

const revisionHead = {
  id: Uuid,
  number: z.number(),
  state: revisionState,
  notes: z.nullable(z.string()),
  releasedAt: z.nullable(InstantText),
  releasedByName: z.nullable(z.string()),
}

export const ScheduleRevision = z.object({
  ...revisionHead,
  steps: z.array(ScheduleStep),
})
export type ScheduleRevision = z.infer<typeof ScheduleRevision>

export const ScheduleRevisionLine = z.object({
  ...revisionHead,
  jobCount: z.number(),
})
export type ScheduleRevisionLine = z.infer<typeof ScheduleRevisionLine>

export const Schedule = z.object({
  ...namedHead,
  revision: z.nullable(ScheduleRevision),
  revisions: z.array(ScheduleRevisionLine),
  /** Jobs planned or running by the revision shown. */
  jobs: z.array(z.object({ id: Uuid, code: z.string(), title: z.string(), state: z.enum(['planned', 'running', 'done', 'held']) })),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Schedule = z.infer<typeof Schedule>
