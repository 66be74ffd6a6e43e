import * as z from 'zod/mini'
import { pageOf, pageQuery, searchText } from './common'
import { DateText, DecimalText, Flag, InstantText, Uuid } from './fields'
import { LotItem } from './lots'
import { ComponentRole, MaterialRole } from './material-roles'

/** A short word in an address, such as a chemistry. */
export const chemistryText = z.string('Name a chemistry.').check(z.trim(), z.minLength(1, 'Name a chemistry.'), z.maxLength(40, 'No chemistry has so long a name.'))

export const MaterialListQuery = z.strictObject({
  role: z.optional(MaterialRole),
  chemistry: z.optional(chemistryText),
  q: searchText,
  archived: z.optional(Flag),
  ...pageQuery,
})
export type MaterialListQuery = z.infer<typeof MaterialListQuery>

const head = {
  id: Uuid,
  code: z.string(),
  name: z.string(),
  role: MaterialRole,
  chemistry: z.string(),
  containsIsocyanates: z.boolean(),
  signalWord: z.nullable(z.enum(['Danger', 'Warning'])),
  supplier: z.nullable(z.string()),
  pricePerKg: z.nullable(DecimalText),
  reorderPointG: z.nullable(DecimalText),
  /** Grams in lots that may be used today: neither blocked, nor used up, nor out of date. */
  usableStockG: DecimalText,
  /** Grams in lots that may not be used. */
  lockedStockG: DecimalText,
  usableLotCount: z.number(),
  nearestExpiresOn: z.nullable(DateText),
  nearestExpiresInDays: z.nullable(z.number()),
  /** The usable stock is at or below the reorder point. */
  reorder: z.boolean(),
  archived: z.boolean(),
  version: z.number(),
}

export const MaterialItem = z.object(head)
export type MaterialItem = z.infer<typeof MaterialItem>
export const MaterialList = pageOf(MaterialItem)
export type MaterialList = z.infer<typeof MaterialList>

/** A hazard or precautionary statement, word for word as the regulation has it. */
export const HazardStatement = z.object({ code: z.string(), kind: z.enum(['H', 'EUH', 'P']), text: z.string() })
export type HazardStatement = z.infer<typeof HazardStatement>

export const MaterialUse = z.object({
  mixId: Uuid,
  mixCode: z.string(),
  mixName: z.string(),
  role: ComponentRole,
  parts: DecimalText,
  partsMax: z.nullable(DecimalText),
})
export type MaterialUse = z.infer<typeof MaterialUse>

/** A material as bought, with its lots and the mixes whose current revision takes it. */
export const Material = z.object({
  ...head,
  makerCode: z.nullable(z.string()),
  densityGPerMl: z.nullable(DecimalText),
  solidsPct: z.nullable(DecimalText),
  volumeSolidsPct: z.nullable(DecimalText),
  reactsPct: z.nullable(DecimalText),
  vocGPerL: z.nullable(DecimalText),
  vocPct: z.nullable(DecimalText),
  waterPct: z.nullable(DecimalText),
  exemptPct: z.nullable(DecimalText),
  flashPointC: z.nullable(DecimalText),
  shelfLifeDays: z.nullable(z.number()),
  protectionMixing: z.nullable(z.string()),
  protectionSpraying: z.nullable(z.string()),
  hazards: z.array(HazardStatement),
  lots: z.array(LotItem),
  usedIn: z.array(MaterialUse),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Material = z.infer<typeof Material>
