import * as z from 'zod/mini'
import { WorkingLine, pageOf, pageQuery, searchText, wholeNumber } from './common'
import { Version, decimalField, neededText, optionalText } from './editor-fields'
import { DateText, DecimalText, Flag, GramsText, InstantText, Uuid } from './fields'
import { MaterialRole } from './material-roles'

/** A lot runs out soon from this many days before its use-by date on. */
export const runsOutWithinDays = 14

/** A lot runs low from this share of what was received on. Common practice, no source. */
export const lowSharePct = '10'

/** What the record says of a lot. */
const lotStates = ['sealed', 'in-use', 'empty', 'blocked'] as const

/** What that means today, by the shop's date: one word, the most pressing first. */
export const lotConditions = ['blocked', 'used-up', 'out-of-date', 'runs-out', 'in-use', 'sealed'] as const
export const LotCondition = z.enum(lotConditions, 'Choose a state.')
export type LotCondition = z.infer<typeof LotCondition>

export const LotListQuery = z.strictObject({
  materialId: z.optional(Uuid),
  state: z.optional(LotCondition),
  /** Lots with a use-by date at most so many days from today, those past it included. */
  expiresWithinDays: z.optional(wholeNumber(3650)),
  /** Lots with a tenth or less of what was received, but not used up. */
  low: z.optional(Flag),
  /** Lots that may be poured today. */
  usable: z.optional(Flag),
  q: searchText,
  order: z._default(z.enum(['newest', 'first-expiring'], 'Choose an order.'), 'newest'),
  ...pageQuery,
})
export type LotListQuery = z.infer<typeof LotListQuery>

const head = {
  id: Uuid,
  /** The maker's batch number on the tin. */
  lotNumber: z.string(),
  materialId: Uuid,
  materialCode: z.string(),
  materialName: z.string(),
  materialRole: MaterialRole,
  state: z.enum(lotStates),
  condition: LotCondition,
  blockedReason: z.nullable(z.string()),
  receivedOn: DateText,
  expiresOn: z.nullable(DateText),
  /** Days from the shop's today to the use-by date; below 0 once it is past. */
  expiresInDays: z.nullable(z.number()),
  openedAt: z.nullable(InstantText),
  place: z.nullable(z.string()),
  pricePerKg: z.nullable(DecimalText),
  receivedG: DecimalText,
  /** Sum of all movements. */
  stockG: DecimalText,
  /** Stock as per cent of what was received; null where nothing was. */
  stockPct: z.nullable(DecimalText),
  low: z.boolean(),
  countNeeded: z.boolean(),
  batchCount: z.number(),
  version: z.number(),
}

export const LotItem = z.object(head)
export type LotItem = z.infer<typeof LotItem>
export const LotList = pageOf(LotItem)
export type LotList = z.infer<typeof LotList>

const movementKinds = ['received', 'poured', 'compensation', 'counted', 'wasted', 'split'] as const

/** Grams that came to a lot (above 0) or left it (below 0). */
export const LotMovement = z.object({
  id: Uuid,
  kind: z.enum(movementKinds),
  grams: DecimalText,
  batchId: z.nullable(Uuid),
  batchCode: z.nullable(z.string()),
  reason: z.nullable(z.string()),
  userName: z.nullable(z.string()),
  at: InstantText,
})
export type LotMovement = z.infer<typeof LotMovement>

/** A lot was blocked or released, by whom and why. */
export const LotEvent = z.object({
  id: Uuid,
  kind: z.enum(['blocked', 'released']),
  reason: z.string(),
  userName: z.nullable(z.string()),
  at: InstantText,
})
export type LotEvent = z.infer<typeof LotEvent>

/** A batch that a lot went into. */
export const LotBatch = z.object({
  id: Uuid,
  code: z.string(),
  mixedAt: InstantText,
  /** Grams poured from this lot. */
  grams: DecimalText,
  mixCode: z.string(),
  mixName: z.string(),
  jobId: z.nullable(Uuid),
  jobCode: z.nullable(z.string()),
  purpose: z.nullable(z.string()),
})
export type LotBatch = z.infer<typeof LotBatch>

export const Lot = z.object({
  ...head,
  /** How the stock comes about, kind by kind. */
  stockWorking: z.array(WorkingLine),
  movements: z.array(LotMovement),
  batches: z.array(LotBatch),
  events: z.array(LotEvent),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Lot = z.infer<typeof Lot>

const lotNumber = neededText('Give the maker\'s batch number on the tin.', 60)
const price = z.nullable(decimalField('Give a price.', 8, 4))

/** More than nothing, to a tenth of a milligram. */
const someGrams = decimalField('Give grams.', 9, 4, { above: true })

/** One delivery of a material goes onto the shelf: in grams, or in litres where the material's density is known. */
export const LotCreateBody = z.strictObject({
  materialId: z.string('Choose a material.').check(z.regex(/^[0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12}$/, 'Choose a material.')),
  lotNumber,
  grams: z.nullable(someGrams),
  litres: z.nullable(decimalField('Give litres.', 6, 4, { above: true })),
  receivedOn: DateText,
  /** The last day that it may be used. */
  expiresOn: z.nullable(DateText),
  pricePerKg: price,
  place: optionalText(80),
}).check((context) => {
  const { grams, litres } = context.value
  if ((grams === null) === (litres === null)) context.issues.push({ code: 'custom', path: ['grams'], message: 'Give the amount, in grams or in litres.', input: context.value })
})
export type LotCreateBody = z.infer<typeof LotCreateBody>

/** Slips of the pen when it was booked in. Grams are put right by a movement. */
export const LotPatchBody = z.strictObject({
  version: Version,
  lotNumber: z.optional(lotNumber),
  receivedOn: z.optional(DateText),
  expiresOn: z.optional(z.nullable(DateText)),
  pricePerKg: z.optional(price),
  place: z.optional(optionalText(80)),
})
export type LotPatchBody = z.infer<typeof LotPatchBody>

const reason = neededText('Say why: the record keeps it.', 400)

export const LotReasonBody = z.strictObject({ reason })
export type LotReasonBody = z.infer<typeof LotReasonBody>

/** Kinds of movement that a person may enter. */
const enteredKinds = ['counted', 'received', 'wasted'] as const

/**
 * Grams by hand. `counted`: what the tin holds now; the difference to the books is written. `received`: more of the same
 * lot came. `wasted`: so much was thrown away.
 */
export const LotMovementBody = z.strictObject({
  kind: z.enum(enteredKinds, 'Choose what happened.'),
  grams: GramsText,
  reason,
}).check((context) => {
  const { kind, grams } = context.value
  if (kind !== 'counted' && !/[1-9]/.test(grams)) context.issues.push({ code: 'custom', path: ['grams'], message: 'It must be more than 0.', input: context.value })
})
export type LotMovementBody = z.infer<typeof LotMovementBody>
