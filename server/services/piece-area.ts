import { D, ZERO, type Dec } from '#shared/engine/decimal'
import { line, type WorkingLine } from '#shared/engine/working'
import type { StoredPiece } from '../repositories/jobs'

const squareMm = new D(1_000_000)
/** Decimals of a stored area: to a square millimetre. */
const storedDecimals = 6

type Sized = Pick<StoredPiece, 'lengthMm' | 'widthMm' | 'thicknessMm' | 'quantity' | 'faces'>

interface Sum {
  formula: string
  mm2: Dec
}

/** Faces and edges of one piece in mm². An edge of unknown thickness counts as nothing. */
function onePiece({ lengthMm: l, widthMm: w, thicknessMm: t, faces }: Sized): Sum {
  const face = new D(l).times(w)
  const edges = t === null ? ZERO : new D(l).plus(w).times(2).times(t)
  const edgeFormula = t === null ? '0' : `2 × (${l} + ${w}) × ${t}`
  if (faces === 'edges') return { formula: edgeFormula, mm2: edges }
  if (faces === 'both') return { formula: `${l} × ${w} × 2 faces`, mm2: face.times(2) }
  if (faces === 'all') return { formula: `${l} × ${w} × 2 faces + ${edgeFormula} edges`, mm2: face.times(2).plus(edges) }
  return { formula: `${l} × ${w} × 1 face`, mm2: face }
}

/**
 * The area of a line of the cut list, all its pieces and coated faces, in m² to six decimals as it is stored.
 * Lengths in mm.
 */
export function pieceAreaM2(piece: Sized): string {
  return onePiece(piece).mm2.times(piece.quantity).div(squareMm).toDecimalPlaces(storedDecimals).toString()
}

/** The sum behind a stored area; one that was entered otherwise says so. */
export function pieceAreaWorking(piece: Sized & { areaM2: string }): WorkingLine[] {
  const { formula, mm2 } = onePiece(piece)
  const worked = pieceAreaM2(piece)
  const lines = [
    line('one piece', `${formula} mm²`, mm2.div(squareMm), 'm²'),
    line('all of this line', `${mm2.div(squareMm).toString()} m² × ${piece.quantity}`, new D(worked), 'm²'),
  ]
  return new D(worked).eq(piece.areaM2) ? lines : [...lines, line('area in force', 'entered by hand', new D(piece.areaM2), 'm²')]
}
