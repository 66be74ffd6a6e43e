import * as z from 'zod/mini'
import { BatchState } from './batch-states'
import { ClimateReading } from './climate'
import { Uuid } from './fields'
import { Timer } from './timers'

/** Instants are ISO 8601 UTC with milliseconds, quantities decimal strings, everywhere below. */
const instant = z.nullable(z.string())

/** A batch while it lives: being mixed, or sealed and in a gun. */
export const LivePot = z.object({
  id: z.uuid(),
  code: z.string(),
  stage: z.enum(['mixing', 'sealed']),
  state: BatchState,
  boothId: z.nullable(z.uuid()),
  boothName: z.nullable(z.string()),
  gunId: z.nullable(z.uuid()),
  gunName: z.nullable(z.string()),
  mixName: z.string(),
  mixCode: z.string(),
  jobCode: z.nullable(z.string()),
  jobTitle: z.nullable(z.string()),
  stepTitle: z.nullable(z.string()),
  purpose: z.nullable(z.string()),
  potNumber: z.number(),
  potCount: z.number(),
  mixedByName: z.string(),
  pouredG: z.string(),
  mixedAt: z.string(),
  reactiveAt: instant,
  lateAt: instant,
  endsAt: instant,
  firstSprayAt: instant,
  lastSprayAt: instant,
  containsIsocyanates: z.boolean(),
  /** Chemistry of the base. */
  chemistry: z.string(),
  silencedUntil: instant,
  silencedBy: z.nullable(z.string()),
  alarm: z.enum(['none', 'sounding', 'silenced']),
  /** The timer that rings when the life is up: what to silence. */
  alarmTimerId: z.nullable(z.uuid()),
  leftoverG: z.nullable(z.string()),
})
export type LivePot = z.infer<typeof LivePot>

/** When what was coated may be coated again. */
export const LiveWindow = z.object({
  /** Id of the application that started it. */
  id: z.uuid(),
  jobId: z.uuid(),
  jobCode: z.string(),
  jobTitle: z.string(),
  jobStepId: z.uuid(),
  stepTitle: z.string(),
  /** Labels of the pieces in the order of the job's list. */
  pieces: z.array(z.string()),
  boothId: z.nullable(z.uuid()),
  boothName: z.nullable(z.string()),
  firstAt: z.string(),
  lastAt: z.string(),
  opensAt: z.string(),
  closingAt: instant,
  /** Null: it never closes. */
  closesAt: instant,
  state: z.enum(['too-early', 'open', 'closing', 'missed']),
})
export type LiveWindow = z.infer<typeof LiveWindow>

/** A booth with what its instrument last said. */
export const LiveBooth = z.object({
  id: z.uuid(),
  name: z.string(),
  clearanceMin: z.string(),
  extraction: z.enum(['running', 'off', 'unknown']),
  climate: z.nullable(ClimateReading),
})
export type LiveBooth = z.infer<typeof LiveBooth>

/** Everything that runs, at one instant: events up to `lastSeq` are in it, later ones are not. */
export const LiveSnapshot = z.object({
  serverNow: z.string(),
  lastSeq: z.number(),
  boothId: z.nullable(z.uuid()),
  pots: z.array(LivePot),
  windows: z.array(LiveWindow),
  /** Timers that have fired and are not done: this booth's, and every booth's pots whose life is up. */
  alarms: z.array(Timer),
  booths: z.array(LiveBooth),
})
export type LiveSnapshot = z.infer<typeof LiveSnapshot>

export const LiveQuery = z.object({ boothId: z.optional(Uuid) })
export type LiveQuery = z.infer<typeof LiveQuery>

export const ServerTime = z.object({ now: z.string() })
export type ServerTime = z.infer<typeof ServerTime>

export const EventsQuery = z.object({
  boothId: z.optional(Uuid),
  lastEventId: z.optional(z.string().check(z.regex(/^\d{1,15}$/, 'That is no event number.'))),
})
export type EventsQuery = z.infer<typeof EventsQuery>

/** What the stream carries in `data:` of every event but the heartbeat and `resync`. */
export const LiveEvent = z.object({
  seq: z.number(),
  type: z.string(),
  at: z.string(),
  serverNow: z.string(),
  subject: z.string(),
  payload: z.unknown(),
})
export type LiveEvent = z.infer<typeof LiveEvent>

/** Heartbeat (`beat`) and the order to fetch everything anew (`resync`). */
export const LiveBeat = z.object({ serverNow: z.string(), lastSeq: z.number() })
export type LiveBeat = z.infer<typeof LiveBeat>
