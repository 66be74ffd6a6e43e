import type { Pictogram } from '#shared/reference/pictograms'

interface PictogramShape {
  /** Filled, on a 40 × 40 grid inside the diamond. */
  fill: string
  /** Drawn as a line. */
  stroke?: string
  /** Cut out in white. */
  cut?: string
}

/** The diamonds' signs in plain outline, black only: a label printer knows no red. */
export const PICTOGRAM_SHAPES: Readonly<Record<Pictogram, PictogramShape>> = {
  explosive: { fill: 'M20 16a6 6 0 1 0 .01 0zM19 8h2v5h-2zM10 12l1.6-1.3 3.4 4-1.6 1.3zM28.4 10.7 30 12l-3.4 4-1.6-1.3zM9 24h5v2H9zM26 24h5v2h-5z' },
  flame: { fill: 'M20 9c1 5 6 6 6 12a6 6 0 0 1-12 0c0-3 2-4 2-7 2 1 3 2 3 4 1-3 1-6 1-9z', stroke: 'M14 29.5h12' },
  oxidiser: { fill: 'M20 8c1 4 4 5 4 8a4 4 0 0 1-8 0c0-2 1-3 1-5 1 .6 2 1.400 2 2.600.6-2 1-3.600 1-5.600z', stroke: 'M20 19.500a5 5 0 1 0 .01 0zM14 31.500h12' },
  gas: { fill: 'M12 27l2-2.500 14-9 2.500 4-14 9z' },
  corrosion: { fill: 'M11 12l8-2 1 3-8 2zM22 11l7 3-1.200 3-7-3zM13 18h2v3h-2zM25 19h2v3h-2zM10 25h8v3h-8zM21 28c0-3 4-4 8-3v3z', stroke: 'M10 29.500h20' },
  skull: { fill: 'M20 9a7 7 0 0 0-4.500 12.200V24h9v-2.800A7 7 0 0 0 20 9z', stroke: 'M12 25.500l16 5.500M28 25.500l-16 5.500', cut: 'M17.200 15.500a1.700 1.700 0 1 0 .01 0zM22.800 15.500a1.700 1.700 0 1 0 .01 0zM19.300 20h1.400v2h-1.400z' },
  health: { fill: 'M20 8.500a3 3 0 1 0 .01 0zM13 29v-8c0-3 3-5 7-5s7 2 7 5v8h-3l-4-4-4 4z', cut: 'M20 18l1.400 3.400 3.400-1.200-1.800 3 3 1.800-3.400.6z' },
  exclamation: { fill: 'M18.200 10h3.600l-.8 12h-2zM20 24.800a2.200 2.200 0 1 0 .01 0z' },
  environment: { fill: 'M13 29v-9l-3-4 1.500-.8 2.500 3V12h1.500v7l3-2.500.8 1.200-3.300 4V29zM19 27c3-5 8-5 12-2-3 4-8 5-12 2z', stroke: 'M9 29.500h20' },
}
