import type { Dec } from './decimal'
import { ZERO, largest, sum } from './decimal'
import { EngineError } from './error'

export interface Portion {
  areaM2: Dec
  /** Position of the first and last piece, from 0. */
  fromPiece?: number
  toPiece?: number
}

const MOST_POTS = 500
/** Halvings of the search for the evenest split: finer than any piece. */
const EVENING_STEPS = 40

/**
 * The fewest equal portions that fit.
 * @throws EngineError `pot-too-small` where even a five-hundredth does not fit
 */
export function divideEqually(areaM2: Dec, fits: (areaM2: Dec) => boolean): Portion[] {
  for (let count = 1; count <= MOST_POTS; count += 1) {
    const each = areaM2.div(count)
    if (fits(each)) return Array.from({ length: count }, () => ({ areaM2: each }))
  }
  throw new EngineError('pot-too-small', 'cupCapacityG', 'Not even a small part of it fits one pot')
}

/**
 * The fewest portions that fit and end on piece borders, in the given order; among those the one whose largest portion
 * is smallest, so that no pot is left with a single piece.
 * @throws EngineError `piece-too-large`, `too-many-pots`
 */
export function divideOnBorders(pieces: readonly Dec[], fitsPot: (areaM2: Dec) => boolean): Portion[] {
  const fits = remembering(fitsPot)
  pieces.forEach((piece, index) => {
    if (!fits(piece)) {
      throw new EngineError('piece-too-large', `pieceAreasM2.${index}`, 'This piece alone does not fit one pot')
    }
  })
  const fewest = fill(pieces, fits)
  if (fewest.length > MOST_POTS) {
    throw new EngineError('too-many-pots', 'pieceAreasM2', `More than ${MOST_POTS} pots would be needed`)
  }
  return fewest.length === 1 ? fewest : even(pieces, fits, fewest)
}

/**
 * What holds a smaller area never refuses it: an answer once given holds for everything below, a refusal for everything
 * above. Only areas between the two are reckoned.
 */
function remembering(fits: (areaM2: Dec) => boolean): (areaM2: Dec) => boolean {
  let fitting: Dec | null = null
  let refused: Dec | null = null
  return (areaM2) => {
    if (fitting?.gte(areaM2)) return true
    if (refused?.lte(areaM2)) return false
    const answer = fits(areaM2)
    if (answer) fitting = areaM2
    else refused = areaM2
    return answer
  }
}

/** Fills pot after pot as far as it goes: no other split on borders needs fewer. */
function fill(pieces: readonly Dec[], fits: (areaM2: Dec) => boolean): Portion[] {
  const portions: { areaM2: Dec, fromPiece: number, toPiece: number }[] = []
  pieces.forEach((piece, index) => {
    const last = portions.at(-1)
    if (last !== undefined && fits(last.areaM2.plus(piece))) {
      last.areaM2 = last.areaM2.plus(piece)
      last.toPiece = index
    }
    else {
      portions.push({ areaM2: piece, fromPiece: index, toPiece: index })
    }
  })
  return portions
}

function even(pieces: readonly Dec[], fits: (areaM2: Dec) => boolean, fewest: Portion[]): Portion[] {
  let best = fewest
  let tooSmall = ZERO
  let enough = largest(fewest.map(({ areaM2 }) => areaM2))
  const least = largest([largest(pieces), sum(pieces).div(fewest.length)])
  for (let step = 0; step < EVENING_STEPS && enough.gt(least); step += 1) {
    const limit = step === 0 ? least : tooSmall.plus(enough).div(2)
    const tried = fill(pieces, areaM2 => areaM2.lte(limit) && fits(areaM2))
    if (tried.length > fewest.length) {
      tooSmall = limit
    }
    else {
      best = tried
      enough = largest(tried.map(({ areaM2 }) => areaM2))
    }
  }
  return best
}
