import * as z from 'zod/mini'
import { pageOf, pageQuery } from './common'
import { CelsiusText, PercentText, Uuid } from './fields'

/** Air and humidity of a booth as read from its instrument. Degrees Celsius and per cent, decimal strings. */
export const ClimateCreateBody = z.strictObject({
  boothId: Uuid,
  airC: CelsiusText,
  rhPct: PercentText,
  surfaceC: z._default(z.nullable(CelsiusText), null),
})
export type ClimateCreateBody = z.infer<typeof ClimateCreateBody>

/** One reading with what follows from it. */
export const ClimateReading = z.object({
  id: z.uuid(),
  boothId: z.uuid(),
  airC: z.string(),
  rhPct: z.string(),
  surfaceC: z.nullable(z.string()),
  dewPointC: z.string(),
  /** How far the surface lies above the dew point, in kelvin; null where the surface was not measured. */
  marginC: z.nullable(z.string()),
  /** False where condensation is to be feared; null where the surface was not measured. */
  ok: z.nullable(z.boolean()),
  /** `cold`, `warm`, `dry` or `damp` where a value lies outside what is commonly sprayed in; null within. */
  airWord: z.nullable(z.string()),
  surfaceWord: z.nullable(z.string()),
  rhWord: z.nullable(z.string()),
  source: z.enum(['typed', 'sensor']),
  userId: z.nullable(z.uuid()),
  at: z.string(),
})
export type ClimateReading = z.infer<typeof ClimateReading>

export const ClimateListQuery = z.object({
  boothId: z.optional(Uuid),
  ...pageQuery,
})
export type ClimateListQuery = z.infer<typeof ClimateListQuery>

export const ClimateList = pageOf(ClimateReading)
export type ClimateList = z.infer<typeof ClimateList>
