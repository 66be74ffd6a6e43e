import { invalid } from './errors'

/** Values of the last row of a page, in the order of its sort: instants as epoch milliseconds, ids as they are. */
export type KeysetValues = (string | number)[]

/** The opaque cursor of a list. */
export function encodeCursor(values: KeysetValues): string {
  return Buffer.from(JSON.stringify(values), 'utf8').toString('base64url')
}

/** Kind of a value in a cursor. `instant`: epoch milliseconds that a DATETIME can hold; `id`: a UUID. */
export type KeysetKind = 'string' | 'instant' | 'id'

const lastInstant = Date.UTC(9999, 11, 31)
const uuidPattern = /^[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}$/

const fitting: Record<KeysetKind, (value: unknown) => boolean> = {
  string: (value) => typeof value === 'string',
  instant: (value) => Number.isSafeInteger(value) && Number(value) >= 0 && Number(value) < lastInstant,
  id: (value) => typeof value === 'string' && uuidPattern.test(value),
}

/**
 * Reads a cursor that `encodeCursor` made.
 *
 * @param shape kind of each value, in order
 * @throws Refusal 400 for anything else
 */
export function decodeCursor(cursor: string, shape: readonly KeysetKind[]): KeysetValues {
  const values = parse(cursor)
  const fits = Array.isArray(values) && values.length === shape.length && shape.every((kind, index) => fitting[kind](values[index]))
  if (!fits) throw invalid([{ path: 'cursor', message: 'This is no cursor of this list.' }])
  return values as KeysetValues
}

function parse(cursor: string): unknown {
  try {
    return JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'))
  } catch (error) {
    if (error instanceof SyntaxError) return null
    throw error
  }
}
