import * as z from 'zod/mini'
import { Figure, MinutesText, Moment } from './calculation-fields'
import { DecimalText, InstantText, words } from './fields'
import { ViscosityCup } from './viscosity-cups'

export const PotLifeCalculationBody = z.strictObject({
  referenceMin: z.optional(MinutesText),
  referenceC: z.optional(DecimalText),
  table: z.optional(z.array(z.strictObject({ c: DecimalText, min: MinutesText })).check(z.minLength(1, 'The table has no row.'), z.maxLength(40, 'A table has at most 40 rows.'))),
  halvesPerC: z.optional(DecimalText),
  temperatureC: DecimalText,
  lateFromPct: z.optional(DecimalText),
  inductionMin: z.optional(MinutesText),
})

export const PotLifeCalculationAnswer = z.object({
  potLifeMin: Figure,
  lateAfterMin: Figure,
  usableMin: Figure,
  basis: z.enum(['sheet', 'table', 'held', 'rule']),
})

export const WindowCalculationBody = z.strictObject({
  firstSprayedAt: InstantText,
  lastSprayedAt: InstantText,
  minMin: MinutesText,
  maxMin: z.nullable(MinutesText),
  workLeftMin: z.optional(MinutesText),
  now: InstantText,
})
export type WindowCalculationBody = z.infer<typeof WindowCalculationBody>

export const WindowCalculationAnswer = z.object({
  opensAt: Moment,
  closesAt: z.nullable(Moment),
  closingAt: z.nullable(Moment),
  state: z.enum(['too-early', 'open', 'closing', 'missed']),
  empty: z.boolean(),
})
export type WindowCalculationAnswer = z.infer<typeof WindowCalculationAnswer>

export const DayPlanCalculationBody = z.strictObject({
  /** `workMin` where a step does not go by area, such as waiting for a lift. */
  steps: z.array(z.strictObject({
    name: words(120),
    workMin: z.optional(MinutesText),
    minMin: z.optional(MinutesText),
    maxMin: z.optional(z.nullable(MinutesText)),
  }), 'List the steps.').check(z.minLength(1, 'Give 1 to 30 steps.'), z.maxLength(30, 'Give 1 to 30 steps.')),
  workingIntervals: z.array(z.strictObject({ from: InstantText, to: InstantText }), 'List the working intervals.')
    .check(z.minLength(1, 'Give 1 to 60 working intervals.'), z.maxLength(60, 'Give 1 to 60 working intervals.')),
  paceM2PerH: DecimalText,
  areaM2: DecimalText,
  from: InstantText,
  todayUntil: z.optional(InstantText),
})
export type DayPlanCalculationBody = z.infer<typeof DayPlanCalculationBody>

export const DayPlanCalculationAnswer = z.object({
  starts: z.nullable(z.array(z.object({
    step: z.number(),
    name: z.string(),
    startsAt: Moment,
    endsAt: Moment,
    opensAt: z.nullable(Moment),
    closesAt: z.nullable(Moment),
  }))),
  brokenBy: z.nullable(z.object({
    step: z.number(),
    window: z.object({ opensAt: Moment, closesAt: z.nullable(Moment) }),
  })),
  nextStart: z.nullable(Moment),
})
export type DayPlanCalculationAnswer = z.infer<typeof DayPlanCalculationAnswer>

export const ViscosityCalculationBody = z.strictObject({
  cup: ViscosityCup,
  seconds: DecimalText,
  toCup: z.optional(ViscosityCup),
})

export const ViscosityCalculationAnswer = z.object({
  mm2PerS: Figure,
  toSeconds: z.optional(Figure),
  approximate: z.literal(true),
})

export const DewPointCalculationBody = z.strictObject({ airC: DecimalText, rhPct: DecimalText, surfaceC: z.optional(DecimalText) })

export const DewPointCalculationAnswer = z.object({
  dewPointC: Figure,
  marginC: z.nullable(Figure),
  ok: z.nullable(z.boolean()),
})
