import * as z from 'zod/mini'
import { WorkingLine, pageOf, pageQuery, searchText, wholeNumber } from './common'
import { DateText, DecimalText, Flag, InstantText, Uuid } from './fields'
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
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Lot = z.infer<typeof Lot>
