import { invalid } from './errors'

/** Values of the last row of a page, in the order of its sort: instants as epoch milliseconds, ids as they are. */
export type KeysetValues = (string | number)[]

/** The opaque cursor of a list. */
export function encodeCursor(values: KeysetValues): string {
  return Buffer.from(JSON.stringify(values), 'utf8').toString('base64url')
}

/**
 * Reads a cursor that `encodeCursor` made.
 *
 * @param shape kind of each value, in order
 * @throws Refusal 400 for anything else
 */
export function decodeCursor(cursor: string, shape: readonly ('string' | 'number')[]): KeysetValues {
  const values = parse(cursor)
  const fits = Array.isArray(values) && values.length === shape.length
    && values.every((value, index) => typeof value === shape[index] && (typeof value === 'string' || Number.isSafeInteger(value)))
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
