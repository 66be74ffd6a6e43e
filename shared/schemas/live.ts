import * as z from 'zod/mini'
import { BatchState } from './batch-states'
import { ClimateReading } from './climate'
import { Uuid } from './fields'
import { Timer } from './timers'

/** Instants are ISO 8601 UTC with milliseconds, quantities decimal strings, everywhere below. */
const instant = z.nullable(z.string())

/** What one gun did with a pot. */
export const PotGun = z.object({
  /** Null: nobody said which gun. */
  gunId: z.nullable(z.uuid()),
  gunName: z.nullable(z.string()),
  firstSprayAt: instant,
  lastSprayAt: instant,
  /** When it was flushed after this pot. */
  flushedAt: instant,
})
export type PotGun = z.infer<typeof PotGun>

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
  jobId: z.nullable(z.uuid()),
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
  /** By the data sheet it stands until then before it is sprayed; null where the sheet asks for no standing time. */
  standsUntil: instant,
  /** Of all guns the first. */
  firstSprayAt: instant,
  /** Of all guns the last; null while one of them still sprays. */
  lastSprayAt: instant,
  /** Every gun that was loaded from it, in the order of loading. */
  guns: z.array(PotGun),
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

/** Where the last spray was not noted: the whole milliseconds from which the window follows. `maxMs` null: it never closes. */
const unended = z.object({ minMs: z.number(), maxMs: z.nullable(z.number()) })

/** When what was coated may be coated again. */
export const LiveWindow = z.object({
  /** Id of the application that started it; of the batch while its last spray was not noted. */
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
  /** A first or last spray behind it was not noted, so that it counts from the careful side. */
  assumed: z.boolean(),
  /** Not null while the last spray is not noted: it may be happening now, so that the opening moves on. */
  unended: z.nullable(unended),
})
export type LiveWindow = z.infer<typeof LiveWindow>

/**
 * Why nobody enters a booth without air-fed mask. `spraying`: since the first shot of an isocyanate mix, whose last one
 * was not noted. `counting`: until `clearAt`, with extraction running. `stopped`: the count rests and begins anew when
 * the extraction runs.
 */
export const LiveClearance = z.object({
  state: z.enum(['spraying', 'counting', 'stopped']),
  /** First shot of what is being sprayed. */
  since: instant,
  lastShotAt: instant,
  clearAt: instant,
})
export type LiveClearance = z.infer<typeof LiveClearance>

/** A booth with what its instrument last said. */
export const LiveBooth = z.object({
  id: z.uuid(),
  name: z.string(),
  clearanceMin: z.string(),
  extraction: z.enum(['running', 'off', 'unknown']),
  climate: z.nullable(ClimateReading),
  /** Null: nobody needs a mask for isocyanates. */
  clearance: z.nullable(LiveClearance),
  /** Guns of this booth and of none: what a pot may be loaded into here. */
  guns: z.array(z.object({ id: z.uuid(), name: z.string() })),
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
