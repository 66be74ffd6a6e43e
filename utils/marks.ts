/** One stroke or field of a mark, on a 20 × 20 grid, drawn in the current colour. `width` 0 means filled. */
export interface MarkShape {
  d: string
  width: number
  dash?: string
  round?: boolean
}

const field = (d: string): MarkShape => ({ d, width: 0 })
const line = (d: string, width: number, more: { dash?: string, round?: boolean } = {}): MarkShape => ({ d, width, ...more })
const ring = (x: number, y: number, r: number): string => `M${x - r} ${y}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0z`
const dot = (x: number, y: number, r: number): MarkShape => field(ring(x, y, r))

/** The house mark: a filled mixing cup with two graduations; turned over it is a bell. */
export const LOGO: readonly MarkShape[] = [
  field('M7.1 4.3a2.9 2.9 0 0 1 5.8 0z'),
  field('M2.25 5h15.5a1.25 1.25 0 0 1 0 2.5H2.25a1.25 1.25 0 0 1 0-2.5z'),
  field('M2.9 8.2h14.2l-1.35 7.4A2.4 2.4 0 0 1 13.4 17.6H6.6a2.4 2.4 0 0 1-2.35-2zM3.4 10.6h5.1v1.15H3.62zM3.95 13.2h3.2v1.15H4.16z'),
  field('M8.2 18.2h3.6a.8.8 0 0 1 0 1.6H8.2a.8.8 0 0 1 0-1.6z'),
]

const BELL_BODY = line('M6.7 2.3h6.6L15.3 13H4.7z', 1.9)
const BELL_LIP = line('M2 13.9h16', 2.3)
const TAG_BODY = line('M2.5 4h10l5 6-5 6h-10z', 2)

export const MARKS = {
  // Pots are bells: a cup would mean an amount.
  'pot-fresh': [BELL_BODY, BELL_LIP, dot(10, 17.5, 1.8)],
  'pot-closing': [BELL_BODY, field('M5.8 7.6h8.4L15.3 13.6H4.7z'), BELL_LIP, dot(10, 17.5, 1.8)],
  'pot-up': [
    field('M7 2.2h6l1.7 9.6h1.7v2.5H3.6v-2.5h1.7z'), dot(10, 16.9, 2),
    line('M3.3 2.6C2 4.5 1.5 6.6 1.7 9M16.7 2.6c1.3 1.9 1.8 4 1.6 6.4', 1.9, { round: true }),
  ],
  'pot-emptied': [line('M6.9 3h6.2l1.9 10H5z', 1.6), line('M3 13.9h14', 1.9), dot(10, 17.3, 1.5), line('M2 17.6 18 2.4', 2.2)],
  // Windows are squares.
  'window-wait': [field('M2.5 2.5h15v15h-15z')],
  'window-open': [line('M3.5 3.5h13v13h-13z', 2.4)],
  'window-closing': [line('M3.5 3.5h13v13h-13z', 2.2), field('M10 3.5h6.5v13H10z')],
  'window-missed': [field('M2 2h16v16H2zM5.2 6.6 8.6 10l-3.4 3.4 1.4 1.4L10 11.4l3.4 3.4 1.4-1.4L11.4 10l3.4-3.4-1.4-1.4L10 8.6 6.6 5.2z')],
  // Weights are triangles.
  'weight-short': [line('M3 4h14l-7 12z', 2.2)],
  'weight-in-tolerance': [field('M1.5 4.5 8 10l-6.5 5.5zM18.5 4.5 12 10l6.5 5.5z'), line('M10 2v16', 2)],
  'weight-too-much': [line('M2 4h16', 2.4), field('M10 7l7.4 11H2.6z')],
  'weight-cannot-tell': [line('M3 4h14l-7 12z', 2.1, { dash: '2.7 1.9' }), dot(10, 8.3, 1.7)],
  'pour-lifted': [line('M4 18h12', 2.2), field('M10 1.6 13.6 6H6.4z'), line('M5.4 8h9.2l-1.1 6.6H6.5z', 1.9)],
  // Lots are tags.
  'lot-in-use': [TAG_BODY, dot(6.6, 10, 1.6)],
  'lot-runs-out': [TAG_BODY, field('M9 5h3l4.2 5L12 15H9z')],
  'lot-out-of-date': [field('M2 3.2h10.8l5.6 6.8-5.6 6.8H2z')],
  'lot-blocked': [TAG_BODY, line('M6 7l6 6M12 7l-6 6', 2)],
  'lot-used-up': [TAG_BODY, line('M2 17.6 18 2.4', 2.2)],
  // Steps of a schedule.
  'step-prep': [line('M2 5h16M2 10h16M2 15h16', 2, { dash: '3 2' })],
  'step-coat': [field('M3 4h5v12H3z'), line('M10 10l8-5M10 10h8M10 10l8 5', 1.8)],
  'step-sand': [line('M2 13l3-5 3 5 3-5 3 5 3-5', 2)],
  'step-wait': [line('M4 3h12M4 17h12M5 3c0 4 4 5 4 7s-4 3-4 7M15 3c0 4-4 5-4 7s4 3 4 7', 1.9)],
  // Plain marks.
  'done': [line('M3 10.5 8 15.5 17 5', 2.6)],
  'silence': [
    line('M3.6 7.6a3.4 3.4 0 0 1 0 4.8M7.4 5.2a7 7 0 0 1 0 9.6M11.2 2.8a10.8 10.8 0 0 1 0 14.4', 2, { round: true }),
    line('M2.4 2.4l15.2 15.2', 2.3),
  ],
  'mask': [line('M3 6.5C5 4 15 4 17 6.5V11c0 3.4-3.2 6-7 6s-7-2.6-7-6z', 1.9), line('M5.4 8.4h9.2', 2.2), dot(10, 13.4, 2)],
  'stir': [line('M13.6 1.8 9 13.4', 2.2), line('M3 10c0 3.6 3 6.6 7 6.6s7-3 7-6.6', 1.9), field('M1.4 12.4 3 9.6l2.6 2z')],
  'link': [dot(4, 10, 2.6), dot(16, 10, 2.6), line('M4 10h12', 2)],
  'no-link': [line(`${ring(4, 10, 2.6)}${ring(16, 10, 2.6)}`, 1.8), line('M6.6 10h1.6M11.8 10h1.6', 2)],
  'warn': [line('M10 1.8 19 17.8H1z', 2), line('M10 7.4v5', 2.2), dot(10, 15, 1.2)],
  'scan': [line('M2 6V2h4M14 2h4v4M18 14v4h-4M6 18H2v-4', 1.8), line('M5 6v8M7.5 6v8M10 6v8M13 6v8M15 6v8', 1.4)],
  'search': [line(ring(8.6, 8.6, 5.6), 1.8), line('M13 13l5 5', 2.2)],
  'close': [line('M4 4l12 12M16 4 4 16', 2.2)],
  'down': [line('M4 7l6 6 6-6', 2.2)],
  'right': [line('M7 4l6 6-6 6', 2.2)],
  'left': [line('M13 4l-6 6 6 6', 2.2)],
  'up': [line('M10 17V4M4 9.5 10 3.5l6 6', 2.2)],
  'menu': [line('M2 5h16M2 10h16M2 15h16', 2)],
  'plus': [line('M10 3v14M3 10h14', 2.2)],
  'file': [line('M4 1.8h8l4 4.4v12H4z', 1.7), line('M7 9h6M7 12h6M7 15h4', 1.5)],
  'scale': [line('M3 7h14M5 7l-1 10h12L15 7M10 7V3M6 3h8', 1.8)],
  'delete': [line('M7 4h11v12H7L1.8 10z', 1.8), line('M10 7.4l5 5.2M15 7.4l-5 5.2', 1.8)],
  'grip': [line('M7 4v12M10 4v12M13 4v12', 1.5)],
  'note': [line('M2.5 3h15v10H9l-4 4v-4H2.5z', 1.8)],
  'question': [line(ring(10, 10, 8), 1.8), line('M7.4 8a2.6 2.6 0 1 1 3.8 2.3c-.8.4-1.2.9-1.2 1.9', 1.8), dot(10, 14.6, 1.2)],
} as const satisfies Record<string, readonly MarkShape[]>

export type MarkName = keyof typeof MARKS
