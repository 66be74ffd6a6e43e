import * as z from 'zod/mini'
import { pageOf, pageQuery } from './common'
import { Uuid, words } from './fields'

const timerKinds = [
  'pot-late', 'pot-up', 'window-opens', 'window-closing', 'window-closes', 'clearance', 'dry-sand', 'dry-stack', 'dry-pack', 'free',
] as const
const timerStates = ['waiting', 'fired', 'acknowledged', 'done', 'cancelled'] as const

export type TimerKind = (typeof timerKinds)[number]
export type TimerState = (typeof timerStates)[number]

/** One instant that the shop waits for. Instants are ISO 8601 UTC with milliseconds. */
export const Timer = z.object({
  id: z.uuid(),
  kind: z.enum(timerKinds),
  subjectType: z.enum(['batch', 'application', 'booth', 'free']),
  subjectId: z.uuid(),
  boothId: z.nullable(z.uuid()),
  boothName: z.nullable(z.string()),
  label: z.string(),
  dueAt: z.string(),
  state: z.enum(timerStates),
  firedAt: z.nullable(z.string()),
  /** When it was last called out. It is again until somebody acknowledges, with pauses that grow with its age. */
  announcedAt: z.nullable(z.string()),
  silencedUntil: z.nullable(z.string()),
  silencedBy: z.nullable(z.string()),
  /** Their own words, where they gave some. */
  silencedReason: z.nullable(z.string()),
  acknowledgedAt: z.nullable(z.string()),
  acknowledgedBy: z.nullable(z.string()),
  createdAt: z.string(),
  version: z.number(),
})
export type Timer = z.infer<typeof Timer>

export const TimerList = pageOf(Timer)
export type TimerList = z.infer<typeof TimerList>

export const TimerListQuery = z.object({
  boothId: z.optional(Uuid),
  kind: z.optional(z.enum(timerKinds, 'That is no kind of timer.')),
  /** `running` is everything that waits, rings or was acknowledged. */
  state: z.optional(z.enum([...timerStates, 'running'], 'That is no state of a timer.')),
  ...pageQuery,
})
export type TimerListQuery = z.infer<typeof TimerListQuery>

const minutes = (least: number, most: number) =>
  z.int(`Give whole minutes, ${least} to ${most}.`).check(
    z.minimum(least, `At least ${least} minute${least === 1 ? '' : 's'}.`),
    z.maximum(most, `At most ${most} minutes.`),
  )

/** A timer of one's own: a name and whole minutes from now. A week is the longest. */
export const TimerCreateBody = z.strictObject({
  name: words(80),
  minutes: minutes(1, 10_080),
  boothId: z._default(z.nullable(Uuid), null),
})
export type TimerCreateBody = z.infer<typeof TimerCreateBody>

/**
 * Ten minutes of quiet. A reason is welcome and not required. `byUserId` names who stands before a screen on which
 * nobody has signed in.
 */
export const TimerSilenceBody = z.strictObject({
  byUserId: z.optional(z.nullable(Uuid)),
  reason: z._default(z.nullable(words(400)), null),
})
export type TimerSilenceBody = z.infer<typeof TimerSilenceBody>

export const TimerExtendBody = z.strictObject({ minutes: minutes(1, 1440) })
export type TimerExtendBody = z.infer<typeof TimerExtendBody>

export const TimerActionBody = z.strictObject({})
