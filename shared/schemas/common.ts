import * as z from 'zod/mini'
import { Cursor, Limit, Uuid } from './fields'

/** The path parameter of every page of one thing. */
export const IdParams = z.object({ id: Uuid })

/** One line of a sum as it is shown when a figure is opened. */
export const WorkingLine = z.object({ what: z.string(), formula: z.string(), value: z.string(), unit: z.string() })
export type WorkingLine = z.infer<typeof WorkingLine>

/** What every list takes beside its filters. */
export const pageQuery = { cursor: z.optional(Cursor), limit: Limit }

/** What everything with revisions has, whatever revision is in force. */
export const namedHead = { id: Uuid, code: z.string(), name: z.string(), archived: z.boolean(), version: z.number() }

/** Words to search for, in code and name. */
export const searchText = z.optional(
  z.string('Search for words.').check(z.trim(), z.minLength(1, 'Search for at least one letter.'), z.maxLength(80, 'Search for at most 80 letters.')),
)

/** A whole number in an address, such as days. */
export const wholeNumber = (most: number) => z.pipe(
  z.string().check(z.regex(/^\d{1,6}$/, `Give a whole number from 0 to ${most}.`)),
  z.pipe(z.transform((text: string) => parseInt(text, 10)), z.int().check(z.maximum(most, `Give a whole number from 0 to ${most}.`))),
)

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
