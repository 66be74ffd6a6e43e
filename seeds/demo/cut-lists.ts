type Faces = 'front' | 'back' | 'both' | 'edges' | 'all'

/** One line of a cut list, in whole millimetres. */
export interface DemoPiece {
  label: string
  lengthMm: number
  widthMm: number
  thicknessMm: number
  quantity: number
  faces: Faces
}

const piece = (label: string, lengthMm: number, widthMm: number, thicknessMm: number, quantity: number, faces: Faces): DemoPiece =>
  ({ label, lengthMm, widthMm, thicknessMm, quantity, faces })

/** Kinds of work, each a cut list that grows with `size`. */
export const cutLists = {
  kitchen: (size: number) => [
    piece('Base door', 716, 597, 19, 6 * size, 'all'),
    piece('Wall door', 716, 447, 19, 5 * size, 'all'),
    piece('Drawer front, deep', 356, 797, 19, 4 * size, 'all'),
    piece('Drawer front, shallow', 176, 797, 19, 4 * size, 'all'),
    piece('Tall door', 2036, 597, 22, 2 * size, 'all'),
    piece('Plinth', 2400, 147, 16, 2 * size, 'front'),
  ],
  wardrobe: (size: number) => [
    piece('Wardrobe door', 2296, 497, 22, 4 * size, 'all'),
    piece('Top-box door', 446, 497, 22, 4 * size, 'all'),
    piece('End panel', 2320, 620, 19, 2, 'both'),
    piece('Cover strip', 2320, 80, 19, 3, 'front'),
  ],
  counter: (size: number) => [
    piece('Counter top', 2600, 680, 38, size, 'all'),
    piece('Counter front', 2600, 940, 22, size, 'front'),
    piece('Return top', 1400, 680, 38, size, 'all'),
    piece('Flap', 780, 680, 38, 1, 'all'),
  ],
  shelving: (size: number) => [
    piece('Shelf', 896, 296, 22, 10 * size, 'all'),
    piece('Upright', 2196, 320, 22, 3 * size, 'all'),
    piece('Back panel', 2196, 920, 8, 2 * size, 'front'),
  ],
  panels: (size: number) => [
    piece('Wall panel', 2400, 597, 16, 5 * size, 'front'),
    piece('Wall panel, narrow', 2400, 297, 16, 3 * size, 'front'),
    piece('Corner piece', 2400, 120, 16, 2 * size, 'both'),
  ],
  beds: (size: number) => [
    piece('Bed side', 1640, 280, 27, 2 * size, 'all'),
    piece('Bed end', 760, 620, 27, 2 * size, 'all'),
    piece('Slat rail', 1580, 45, 27, 4 * size, 'all'),
    piece('Drawer front', 780, 200, 19, 2 * size, 'all'),
  ],
  tables: (size: number) => [
    piece('Table top', 1400, 700, 25, 2 * size, 'all'),
    piece('Apron, long', 1240, 90, 22, 4 * size, 'all'),
    piece('Apron, short', 560, 90, 22, 4 * size, 'all'),
    piece('Leg', 710, 220, 55, 8 * size, 'both'),
  ],
  boxes: (size: number) => [
    piece('Plinth side', 900, 400, 19, 4 * size, 'front'),
    piece('Plinth top', 400, 400, 19, size, 'front'),
    piece('Box lid', 500, 500, 19, size, 'all'),
  ],
  stairs: (size: number) => [
    piece('Tread', 940, 270, 40, 7 * size, 'all'),
    piece('Riser', 940, 176, 22, 7 * size, 'both'),
    piece('Handrail', 3400, 160, 45, size, 'both'),
    piece('Baluster', 860, 130, 32, 12 * size, 'both'),
  ],
} satisfies Record<string, (size: number) => DemoPiece[]>
export type CutListName = keyof typeof cutLists

/** Square millimetres to be coated. */
function areaMm2({ lengthMm, widthMm, thicknessMm, quantity, faces }: DemoPiece): number {
  const face = lengthMm * widthMm
  const edges = 2 * (lengthMm + widthMm) * thicknessMm
  const of = { front: face, back: face, both: 2 * face, edges, all: 2 * face + edges }
  return of[faces] * quantity
}

/** Whole square millimetres as square metres, exact. */
export function m2Of(mm2: number): string {
  const text = `${mm2}`.padStart(7, '0')
  return `${text.slice(0, -6)}.${text.slice(-6)}`
}

/** The area of a line in whole square millimetres and as the pieces' record keeps it. */
export const areaOf = (piece: DemoPiece): { mm2: number, m2: string } => {
  const mm2 = areaMm2(piece)
  return { mm2, m2: m2Of(mm2) }
}
