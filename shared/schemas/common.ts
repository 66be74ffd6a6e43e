import * as z from 'zod/mini'

/** Identity of a row: a UUID in lower case, as the database stores it. */
export const Uuid = z.uuid('That is not an id.').check(z.toLowerCase())

/** The path parameter of every page of one thing. */
export const IdParams = z.object({ id: Uuid })

/** A quantity as it travels: a plain decimal with a point and no exponent. */
export const DecimalText = z.string().check(z.regex(/^-?\d+(\.\d+)?$/))

/** An instant: ISO 8601 in UTC with milliseconds. */
export const InstantText = z.iso.datetime({ precision: 3 })

/** A day of the shop's calendar: `2027-03-31`. */
export const DayText = z.iso.date()

/** One line of a sum as it is shown when a figure is opened. */
export const WorkingLine = z.object({ what: z.string(), formula: z.string(), value: z.string(), unit: z.string() })
export type WorkingLine = z.infer<typeof WorkingLine>

/** Most rows of one page of a list. */
export const maxPageSize = 200

const pageLimit = 'Ask for 1 to 200 rows.'

/** What every list takes beside its filters. */
export const pageQuery = {
  cursor: z.optional(z.string('That cursor is not ours.').check(z.maxLength(600, 'That cursor is not ours.'), z.regex(/^[\w-]+$/, 'That cursor is not ours.'))),
  limit: z._default(
    z.coerce.number(pageLimit).check(z.multipleOf(1, pageLimit), z.minimum(1, pageLimit), z.maximum(maxPageSize, pageLimit)),
    50,
  ),
}

/** Words to search for, in code and name. */
export const searchText = z.optional(
  z.string('Search for words.').check(z.trim(), z.minLength(1, 'Search for at least one letter.'), z.maxLength(80, 'Search for at most 80 letters.')),
)

/** A yes or no in an address: `true` or `false`. */
export const flag = z.optional(z.pipe(z.enum(['true', 'false'], 'Say true or false.'), z.transform((text: string) => text === 'true')))

/** A page of a list. `nextCursor` is null on the last one. */
export const pageOf = <Item extends z.ZodMiniType>(item: Item) =>
  z.object({ items: z.array(item), nextCursor: z.nullable(z.string()) })

/** What a refusal answers, whatever its status. `path` names the field, never its value. */
export const ErrorAnswer = z.object({
  code: z.string(),
  message: z.string(),
  fields: z.array(z.object({ path: z.string(), message: z.string() })),
})
export type ErrorAnswer = z.infer<typeof ErrorAnswer>
