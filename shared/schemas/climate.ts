import * as z from 'zod/mini'

const decimal = (message: string) => z.string(message).check(z.trim(), z.regex(/^-?\d{1,3}(\.\d{1,2})?$/, message))

/** Air and humidity of a booth as read from its instrument. Degrees Celsius and per cent, decimal strings. */
export const ClimateCreateBody = z.strictObject({
  boothId: z.uuid('Choose a booth.'),
  airC: decimal('Give the air in °C, with at most two decimals.'),
  rhPct: decimal('Give the humidity in %, with at most two decimals.'),
  surfaceC: z.optional(z.nullable(decimal('Give the surface in °C, with at most two decimals.'))),
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
  source: z.enum(['typed', 'sensor']),
  userId: z.nullable(z.uuid()),
  at: z.string(),
})
export type ClimateReading = z.infer<typeof ClimateReading>

export const ClimateListQuery = z.object({
  boothId: z.optional(z.uuid('That is not an id.')),
  cursor: z.optional(z.string().check(z.maxLength(400, 'That cursor is too long.'))),
  limit: z.optional(z.string().check(z.regex(/^([1-9]|[1-9]\d|1\d\d|200)$/, 'From 1 to 200.'))),
})
export type ClimateListQuery = z.infer<typeof ClimateListQuery>

export const ClimateList = z.object({ items: z.array(ClimateReading), nextCursor: z.nullable(z.string()) })
export type ClimateList = z.infer<typeof ClimateList>
