import * as z from 'zod/mini'

/** Name of a calculation in a path; which ones there are stands in the table of calculations. */
export const CalculationParams = z.object({ name: z.string().check(z.maxLength(64, 'No calculation has so long a name.')) })

/** A body that is checked by the table of calculations once its name is known. */
export const AnyBody = z.unknown()
