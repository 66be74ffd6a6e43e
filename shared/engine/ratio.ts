import { D, ZERO } from './decimal'
import { EngineError } from './error'

export interface RatioPart {
  /** Plain decimal, more than 0. */
  parts: string
  /** Upper end where viscosity decides how much: the `30` of `20–30`. */
  partsMax?: string
}

const LONGEST_RATIO = 120
const NUMBER = /^\d{1,9}(?:[.,]\d{1,9})?$/

/**
 * Reads a ratio as the trade writes it: `100:50:20`, `100 / 12,5`, `3+1`, `100 50 20`, `100:25:20–30`.
 * Comma and point both separate decimals here, and only here.
 * @throws EngineError `ratio-unreadable`, `ratio-too-many`, `ratio-range`
 */
export function parseRatio(text: string, field = 'ratio'): RatioPart[] {
  const clean = text.trim().replace(/\s*[-–]\s*/g, '–')
  const pieces = clean.split(/\s*[:/+]\s*|\s+/)
  if (text.length > LONGEST_RATIO || clean === '') throw unreadable(field)
  if (pieces.length > 8) {
    throw new EngineError('ratio-too-many', field, 'A mix has at most 8 components')
  }
  return pieces.map(piece => parsePart(piece, field))
}

/** Prints with `:` between the components and `–` in a range; the parts stand as given, decimals with a point. */
export function printRatio(ratio: readonly RatioPart[]): string {
  return ratio.map(({ parts, partsMax }) => (partsMax === undefined ? parts : `${parts}–${partsMax}`)).join(':')
}

function parsePart(piece: string, field: string): RatioPart {
  const [low = '', high, ...rest] = piece.split('–')
  if (rest.length > 0) throw unreadable(field)
  const parts = parseParts(low, field)
  if (high === undefined) return { parts }
  const partsMax = parseParts(high, field)
  if (new D(partsMax).lte(parts)) {
    throw new EngineError('ratio-range', field, 'A range goes from the smaller to the larger figure')
  }
  return { parts, partsMax }
}

function parseParts(text: string, field: string): string {
  if (!NUMBER.test(text)) throw unreadable(field)
  const value = new D(text.replace(',', '.'))
  if (value.lte(ZERO)) throw new EngineError('ratio-unreadable', field, 'Every part must be more than 0')
  return value.toString()
}

function unreadable(field: string): EngineError {
  return new EngineError('ratio-unreadable', field, 'Write the ratio like 100:50:20')
}
