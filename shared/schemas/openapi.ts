import * as z from 'zod/mini'

/** Name of a calculation in a path; which ones there are stands in the table of calculations. */
export const CalculationParams = z.object({ name: z.string().check(z.maxLength(64, 'No calculation has so long a name.')) })

/** A body that is checked by the table of calculations once its name is known. */
export const AnyBody = z.unknown()

/** The description of the API, itself in the form of OpenAPI 3.1. */
export const OpenApiDocument = z.object({
  openapi: z.literal('3.1.0'),
  info: z.object({ title: z.string(), version: z.string(), description: z.string() }),
  paths: z.record(z.string(), z.record(z.string(), z.unknown())),
  components: z.record(z.string(), z.record(z.string(), z.unknown())),
})
export type OpenApiDocument = z.infer<typeof OpenApiDocument>
