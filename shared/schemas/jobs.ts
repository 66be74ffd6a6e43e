import * as z from 'zod/mini'
import { BatchState } from './batch-states'
import { WorkingLine, pageOf, pageQuery, searchText } from './common'
import { DateText, DecimalText, InstantText, Uuid } from './fields'
import { LiveWindow } from './live'
import { ComponentRole } from './material-roles'
import { Faces, ScheduleStep } from './schedules'

export const jobStates = ['planned', 'running', 'done', 'held'] as const
export const JobState = z.enum(jobStates, 'Choose a state.')
export type JobState = z.infer<typeof JobState>

export const JobListQuery = z.strictObject({
  /** One state, or `open`: everything that is not done. */
  state: z.optional(z.enum([...jobStates, 'open', 'all'], 'Choose a state.')),
  q: searchText,
  ...pageQuery,
})
export type JobListQuery = z.infer<typeof JobListQuery>

const head = {
  id: Uuid,
  code: z.string(),
  title: z.string(),
  customer: z.nullable(z.string()),
  state: JobState,
  dueOn: z.nullable(DateText),
  /** Days from the shop's today; below 0 when the day is past. */
  dueInDays: z.nullable(z.number()),
  scheduleId: Uuid,
  scheduleCode: z.string(),
  scheduleName: z.string(),
  scheduleRevisionId: Uuid,
  scheduleRevisionNumber: z.number(),
  stepCount: z.number(),
  doneStepCount: z.number(),
  startedStepCount: z.number(),
  /** Pieces counted by their quantities. */
  pieceCount: z.number(),
  areaM2: DecimalText,
  version: z.number(),
}

export const JobItem = z.object(head)
export type JobItem = z.infer<typeof JobItem>
export const JobList = pageOf(JobItem)
export type JobList = z.infer<typeof JobList>

const stepStates = ['to-come', 'started', 'done'] as const
export const StepState = z.enum(stepStates)
export type StepState = z.infer<typeof StepState>

/** A line of the cut list. */
export const JobPiece = z.object({
  id: Uuid,
  position: z.number(),
  label: z.string(),
  lengthMm: DecimalText,
  widthMm: DecimalText,
  thicknessMm: z.nullable(DecimalText),
  quantity: z.number(),
  faces: Faces,
  areaM2: DecimalText,
  areaWorking: z.array(WorkingLine),
  rack: z.nullable(z.string()),
  heldReason: z.nullable(z.string()),
  /** Where this line stands, step by step. */
  stepStates: z.array(StepState),
})
export type JobPiece = z.infer<typeof JobPiece>

/** A live or past batch of a job. */
export const JobBatch = z.object({
  id: Uuid,
  code: z.string(),
  jobStepId: z.nullable(Uuid),
  mixedAt: InstantText,
  pouredTotalG: DecimalText,
  state: BatchState,
  mixedByName: z.string(),
})
export type JobBatch = z.infer<typeof JobBatch>

export const JobStep = z.object({
  id: Uuid,
  position: z.number(),
  state: StepState,
  step: ScheduleStep,
  boothId: z.nullable(Uuid),
  boothName: z.nullable(z.string()),
  gunId: z.nullable(Uuid),
  gunName: z.nullable(z.string()),
  benchListOn: z.nullable(DateText),
  /** Pieces (by their quantities) on which the step is done. */
  donePieceCount: z.number(),
  lastAt: z.nullable(InstantText),
  lastByName: z.nullable(z.string()),
  lastBoothName: z.nullable(z.string()),
  version: z.number(),
})
export type JobStep = z.infer<typeof JobStep>

/** An overcoat window that still counts, with where its pieces lie. */
export const JobWindow = z.extend(LiveWindow, {
  racks: z.array(z.string()),
  /** Pieces by their quantities. */
  pieceCount: z.number(),
})
export type JobWindow = z.infer<typeof JobWindow>

/** What the coats still to spray need of one material, against what may be used today. */
export const JobNeed = z.object({
  materialId: Uuid,
  materialCode: z.string(),
  materialName: z.string(),
  role: ComponentRole,
  neededG: DecimalText,
  usableStockG: DecimalText,
  afterG: DecimalText,
  reorderPointG: z.nullable(DecimalText),
  reorder: z.boolean(),
  /** More than may be used today. */
  short: z.boolean(),
  /** Share of the usable stock that it takes; null where there is none. */
  takesPct: z.nullable(DecimalText),
  working: z.array(WorkingLine),
})
export type JobNeed = z.infer<typeof JobNeed>

export const Job = z.object({
  ...head,
  notes: z.nullable(z.string()),
  pieces: z.array(JobPiece),
  areaWorking: z.array(WorkingLine),
  steps: z.array(JobStep),
  windows: z.array(JobWindow),
  needs: z.array(JobNeed),
  /** Coats that could not be reckoned, with what is missing. */
  needsMissing: z.array(z.object({ jobStepId: Uuid, title: z.string(), reason: z.string() })),
  batchCount: z.number(),
  /** The latest ones, newest first. */
  batches: z.array(JobBatch),
  serverNow: InstantText,
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Job = z.infer<typeof Job>
