import * as z from 'zod/mini'

/** A decimal as it leaves the engine: any number of digits, at most 12 decimals. */
export const Figure = z.string().check(z.regex(/^-?\d+(?:\.\d{1,12})?$/))

/** An instant as it leaves the engine. */
export const Moment = z.iso.datetime({ precision: 3 })

/** Minutes of a data sheet: never below nothing, less than ten years. */
export const MinutesText = z.string('Give minutes with a point.').check(
  z.regex(/^\d{1,7}(?:\.\d{1,12})?$/, 'Give minutes with a point.'),
  z.refine(text => (text.split('.')[0] ?? '').padStart(7, '0') < '5256000', 'Less than ten years.'),
)
