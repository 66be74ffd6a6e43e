import * as z from 'zod/mini'
import { pageOf, pageQuery } from './common'
import { DateText, DecimalText, Flag, InstantText, Uuid } from './fields'
import { roles } from '../types/roles'

/** Lists of the shop's own things: all active ones, or with `inactive=true` those taken out of use. */
export const ShopListQuery = z.strictObject({ inactive: z.optional(Flag), ...pageQuery })
export type ShopListQuery = z.infer<typeof ShopListQuery>

const head = { id: Uuid, name: z.string(), active: z.boolean(), version: z.number() }

export const Booth = z.object({
  ...head,
  /** Minutes after the last shot until nobody needs an air-fed mask. */
  clearanceMin: DecimalText,
  clearanceMeasured: z.boolean(),
  extraction: z.enum(['running', 'off', 'unknown']),
})
export type Booth = z.infer<typeof Booth>
/** What a person sees of the booth's extraction, now or at an earlier instant. */
export const BoothExtractionBody = z.strictObject({
  state: z.enum(['running', 'off', 'unknown'], 'Say whether it runs.'),
  at: z._default(z.nullable(InstantText), null),
})
export type BoothExtractionBody = z.infer<typeof BoothExtractionBody>
export const BoothList = pageOf(Booth)
export type BoothList = z.infer<typeof BoothList>

export const Gun = z.object({
  ...head,
  kind: z.enum(['cup-gun', 'pressure-pot', 'pump']),
  nozzleMm: z.nullable(DecimalText),
  boothId: z.nullable(Uuid),
  boothName: z.nullable(z.string()),
  /** Share of what leaves the gun that stays on the panel, by shape of work. */
  efficiencyFlatPct: DecimalText,
  efficiencyFramesPct: DecimalText,
  efficiencySticksPct: DecimalText,
  efficiencyMeasured: z.boolean(),
  /** Lost per pot in hose, cup and filter. */
  residueG: DecimalText,
  smallestFillG: DecimalText,
  flowGPerMin: z.nullable(DecimalText),
  paceM2PerH: z.nullable(DecimalText),
})
export type Gun = z.infer<typeof Gun>
export const GunList = pageOf(Gun)
export type GunList = z.infer<typeof GunList>

/** Where a scale's weights come from: typed by hand, or made up by the bench for practice. */
export const scaleSources = ['keypad', 'simulated'] as const

export const Scale = z.object({
  ...head,
  source: z.enum(scaleSources),
  divisionG: DecimalText,
  capacityG: DecimalText,
  mpeG: z.nullable(DecimalText),
  accuracyClass: z.nullable(z.enum(['I', 'II', 'III', 'IIII'])),
  verificationIntervalG: z.nullable(DecimalText),
  nextCheckOn: z.nullable(DateText),
  nextCheckInDays: z.nullable(z.number()),
})
export type Scale = z.infer<typeof Scale>
export const ScaleList = pageOf(Scale)
export type ScaleList = z.infer<typeof ScaleList>

export const MixingCup = z.object({ ...head, capacityMl: DecimalText, fillLineMl: DecimalText })
export type MixingCup = z.infer<typeof MixingCup>
export const MixingCupList = pageOf(MixingCup)
export type MixingCupList = z.infer<typeof MixingCupList>

/** A person, as seniors see them. Never carries a password or a PIN. */
export const User = z.object({
  ...head,
  email: z.string(),
  initials: z.string(),
  role: z.enum(roles),
  isocyanateTrainingUntil: z.nullable(DateText),
  /** By the shop's today; null where no training is recorded. */
  isocyanateTraining: z.nullable(z.enum(['valid', 'ends-soon', 'over'])),
  /** False for those taken out of use and those without a password. */
  canSignIn: z.boolean(),
  /** Somebody else knows the password; it has to be changed at the next sign-in. */
  mustChangePassword: z.boolean(),
})
export type User = z.infer<typeof User>
export const UserList = pageOf(User)
export type UserList = z.infer<typeof UserList>

/** Who may be asked for by name at a shared screen: active people, nothing but how they are called. */
export const PeopleList = z.object({ items: z.array(z.object({ id: Uuid, name: z.string(), initials: z.string() })) })
export type PeopleList = z.infer<typeof PeopleList>
