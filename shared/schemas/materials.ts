import * as z from 'zod/mini'
import { pageOf, pageQuery, searchText } from './common'
import { Code, Version, decimalField, neededText, optionalText } from './editor-fields'
import { CelsiusText, DateText, DecimalText, Flag, GramsText, InstantText, PercentText, Uuid } from './fields'
import { LotItem } from './lots'
import { ComponentRole, MaterialRole } from './material-roles'
import { materialFaults } from '../utils/material-rules'

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
  densityGPerMl: z.nullable(DecimalText),
  solidsPct: z.nullable(DecimalText),
  reactsPct: z.nullable(DecimalText),
  vocGPerL: z.nullable(DecimalText),
  vocPct: z.nullable(DecimalText),
  waterPct: z.nullable(DecimalText),
  exemptPct: z.nullable(DecimalText),
  shelfLifeDays: z.nullable(z.number()),
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
  volumeSolidsPct: z.nullable(DecimalText),
  flashPointC: z.nullable(DecimalText),
  protectionMixing: z.nullable(z.string()),
  protectionSpraying: z.nullable(z.string()),
  hazards: z.array(HazardStatement),
  lots: z.array(LotItem),
  usedIn: z.array(MaterialUse),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Material = z.infer<typeof Material>

export const HazardStatementList = z.object({ items: z.array(HazardStatement), nextCursor: z.nullable(z.string()) })
export type HazardStatementList = z.infer<typeof HazardStatementList>

/** What a manager enters of a material, from its data sheets. Null is what a sheet does not say. */
const fields = {
  code: Code,
  name: neededText('Give it a name.', 120),
  role: MaterialRole,
  chemistry: z.string('Choose a chemistry.').check(z.trim(), z.regex(/^[a-z0-9][a-z0-9-]{0,39}$/, 'Choose a chemistry.')),
  containsIsocyanates: z.boolean('Say whether it contains isocyanates.'),
  densityGPerMl: z.nullable(decimalField('Give the density in g/mL.', 2, 5, { above: true })),
  solidsPct: z.nullable(PercentText),
  volumeSolidsPct: z.nullable(PercentText),
  reactsPct: z.nullable(PercentText),
  vocGPerL: z.nullable(decimalField('Give grams per litre.', 4, 3)),
  vocPct: z.nullable(PercentText),
  waterPct: z.nullable(PercentText),
  exemptPct: z.nullable(PercentText),
  flashPointC: z.nullable(CelsiusText),
  shelfLifeDays: z.nullable(z.int('Give whole days.').check(z.minimum(1, 'At least one day.'), z.maximum(7300, 'At most 7300 days.'))),
  supplier: optionalText(120),
  makerCode: optionalText(60),
  pricePerKg: z.nullable(decimalField('Give a price.', 8, 4)),
  signalWord: z.nullable(z.enum(['Danger', 'Warning'], 'Choose the signal word.')),
  hazardCodes: z.array(z.string().check(z.regex(/^[A-Z]{1,3}\d[\dA-Za-z+]{0,24}$/, 'This is no statement\'s number.')), 'List the statements.').check(z.maxLength(80, 'At most 80 statements.')),
  protectionMixing: optionalText(400),
  protectionSpraying: optionalText(400),
  reorderPointG: z.nullable(GramsText),
}

const whole = z.strictObject(fields)
export type MaterialFields = z.infer<typeof whole>

export const MaterialCreateBody = whole.check((context) => {
  for (const { path, message } of materialFaults(context.value)) context.issues.push({ code: 'custom', path: [path], message, input: context.value })
})
export type MaterialCreateBody = z.infer<typeof MaterialCreateBody>

export const MaterialPatchBody = z.extend(z.partial(whole), { version: Version, archived: z.optional(z.boolean()) }).check((context) => {
  for (const { path, message } of materialFaults(context.value)) context.issues.push({ code: 'custom', path: [path], message, input: context.value })
})
export type MaterialPatchBody = z.infer<typeof MaterialPatchBody>
