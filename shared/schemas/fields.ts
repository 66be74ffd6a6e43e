import * as z from 'zod/mini'

/** A UUID in lower case, whatever case it was sent in. */
export const Uuid = z.string('This is missing.').check(
  z.regex(/^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i, 'This is no id.'),
  z.toLowerCase(),
)

/** An instant in ISO 8601, UTC, with milliseconds: `2026-11-17T07:53:00.000Z`. */
export const InstantText = z.iso.datetime({ precision: 3, error: 'Give an instant in UTC with milliseconds.' }).check(
  z.regex(/^(?:19[7-9]|20\d|21\d)\d/, 'Give a year from 1970 to 2199.'),
)

/** A calendar day of the shop: `2026-11-17`. */
export const DateText = z.iso.date({ error: 'Give a day like 2026-11-17.' }).check(
  z.regex(/^(?:19[7-9]|20\d|21\d)\d/, 'Give a year from 1970 to 2199.'),
)

/** A plain decimal with a point; the arithmetic checks its bounds. */
export const DecimalText = z.string('Give a plain number with a point.').check(
  z.regex(/^-?\d{1,12}(?:\.\d{1,12})?$/, 'Give a plain number with a point.'),
)

/** Grams as the record keeps them: at most four decimals. A minus is let through, so that a rule can name what is wrong. */
export const SignedGramsText = z.string().check(
  z.regex(/^-?\d{1,9}(?:\.\d{1,4})?$/, 'Give grams with a point and at most four decimals.'),
)

/** Grams as the record keeps them, never below nothing. */
export const GramsText = z.string().check(
  z.regex(/^\d{1,9}(?:\.\d{1,4})?$/, 'Give grams with a point and at most four decimals.'),
)

/** Degrees Celsius to a hundredth. */
export const CelsiusText = z.string().check(
  z.regex(/^-?\d{1,3}(?:\.\d{1,2})?$/, 'Give degrees Celsius with a point and at most two decimals.'),
)

/** A percentage from 0 to 100 with at most four decimals. */
export const PercentText = z.string().check(
  z.regex(/^(?:100(?:\.0{1,4})?|\d{1,2}(?:\.\d{1,4})?)$/, 'Give a percentage from 0 to 100.'),
)

/** Words that must not be empty. */
export const words = (most: number) =>
  z.string().check(z.trim(), z.minLength(1, 'Write something here.'), z.maxLength(most, `Use at most ${most} characters.`))

/** The `limit` of a list: 50 unless asked otherwise, 200 at most. */
export const Limit = z._default(
  z.pipe(
    z.string().check(z.regex(/^\d{1,3}$/, 'Give a whole number from 1 to 200.')),
    z.pipe(z.transform((text: string) => parseInt(text, 10)), z.int().check(z.minimum(1), z.maximum(200))),
  ),
  50,
)

/** The `cursor` of a list, as the page before gave it. */
export const Cursor = z.string().check(z.minLength(1), z.maxLength(400))

/** A switch in a query. */
export const Flag = z.pipe(z.enum(['true', 'false']), z.transform((text: 'true' | 'false') => text === 'true'))
