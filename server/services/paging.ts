import { invalid } from '../utils/errors'
import { decodeCursor, encodeCursor, type KeysetValues } from '../utils/keyset'

/** One page of a list as the API answers it. */
export interface Page<T> {
  items: T[]
  nextCursor: string | null
}

/** What a value in a cursor must look like: comparing other text with such a column would fail in the database. */
const forms = {
  id: /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/,
  day: /^\d{4}-(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])$/,
  text: /^.{1,160}$/su,
}

/**
 * Where the page before ended, or null on the first one.
 * @param shape form of each value, in the order of the sort
 * @throws Refusal 400 for what no list gave
 */
export function readCursor(cursor: string | undefined, shape: readonly (keyof typeof forms)[]): string[] | null {
  if (cursor === undefined) return null
  const values = decodeCursor(cursor, shape.map(() => 'string' as const)).map(String)
  if (!shape.every((form, place) => forms[form].test(values[place] ?? ''))) {
    throw invalid([{ path: 'cursor', message: 'This is no cursor of this list.' }])
  }
  return values
}

/** Cuts a page out of rows read one too many: that one only tells that there is more. */
export function pageOf<T>(rows: readonly T[], limit: number, keyOf: (last: T) => KeysetValues): Page<T> {
  const items = rows.slice(0, limit)
  const last = items.at(-1)
  return { items, nextCursor: rows.length > limit && last !== undefined ? encodeCursor(keyOf(last)) : null }
}
