/** One field that somebody else saved differently while it was being filled in here. */
export interface FieldConflict {
  path: string
  mine: unknown
  theirs: unknown
  /** True when only they changed it: theirs is the value to keep unless somebody says otherwise. */
  untouched: boolean
}

/** Members that belong to the saving and not to the thing. */
const bookkeeping = new Set(['version'])

const same = (one: unknown, other: unknown): boolean => JSON.stringify(one) === JSON.stringify(other)

/**
 * Where what is typed here and what was saved by somebody else do not agree. A field that only was changed here is no
 * conflict.
 *
 * @param start what the fields held when the form was opened
 */
export function conflictsOf<T extends Record<string, unknown>>(start: T, mine: T, theirs: T): FieldConflict[] {
  return Object.keys(theirs)
    .filter(path => !bookkeeping.has(path) && !same(mine[path], theirs[path]) && !same(start[path], theirs[path]))
    .map(path => ({ path, mine: mine[path], theirs: theirs[path], untouched: same(start[path], mine[path]) }))
}

/** Fields that hold something else than at the start. */
export function changedFields<T extends Record<string, unknown>>(start: T, now: T): string[] {
  return Object.keys(now).filter(path => !bookkeeping.has(path) && !same(start[path], now[path]))
}

/** A form's empty text fields as the API says "not given", at any depth. */
export function blanksToNull(value: unknown): unknown {
  if (value === '') return null
  if (Array.isArray(value)) return value.map(blanksToNull)
  if (value === null || typeof value !== 'object') return value
  return Object.fromEntries(Object.entries(value).map(([key, member]) => [key, blanksToNull(member)]))
}
