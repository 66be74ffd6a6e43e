import type { BoothKey } from './places'

type Shape = 'flat' | 'frames' | 'sticks'

/** One step; minutes and grams per square metre as whole numbers. What a kind does not have is left out. */
export interface DemoStep {
  kind: 'prepare' | 'coat' | 'sand' | 'wait' | 'inspect'
  title: string
  grit?: string
  mix?: string
  /** Least, wanted and most wet coat weight in g/m². */
  gsm?: readonly [number, number, number]
  gsmIs?: 'deposited' | 'sprayed'
  coats?: number
  passes?: number
  shape?: Shape
  maxBar?: string
  /** Minutes between the coats of this step. */
  interval?: readonly [number, number]
  /** Minutes to the next coat: earliest, and latest without sanding. */
  overcoat?: readonly [number, number | null]
  /** Minutes: earliest to sand, and latest next coat after sanding. */
  sanding?: readonly [number, number | null]
  flashOff?: number
  dry?: number
  dryPlace?: string
  layFlat?: boolean
  doNotSand?: boolean
  keepFromDraughts?: boolean
  cautions?: string
  instructions?: string
}

/** A finishing schedule of the invented shop. All figures are common practice, no source. */
export interface DemoSchedule {
  code: string
  name: string
  /** Oldest first; all but the last are superseded. */
  revisions: readonly { notes?: string, steps: readonly DemoStep[] }[]
}

const prepare = (title = 'Sand bare faces and edges, blow off'): DemoStep => ({
  kind: 'prepare', title, grit: 'P150', instructions: 'Break sharp edges, blow off, check wood moisture before the first coat.',
})
const sand = (grit: string, title = 'Sand between coats'): DemoStep => ({ kind: 'sand', title, grit, instructions: 'Even grey, no shiny spots; blow off and wipe.' })
const wait = (hours: number, dryPlace = 'drying room'): DemoStep => ({ kind: 'wait', title: `Dry ${hours} h`, dry: hours * 60, dryPlace })
const inspect: DemoStep = { kind: 'inspect', title: 'Inspect gloss, colour and edges', instructions: 'Look along the light; touch the edges; count the pieces.' }
const coat = (title: string, mix: string, gsm: DemoStep['gsm'], own: Partial<DemoStep>): DemoStep =>
  ({ kind: 'coat', title, mix, gsm, gsmIs: 'deposited', coats: 1, shape: 'flat', ...own })

/** Polyurethane sealer, twice, wet sanding not before the next day. */
const sealTwice = (mix: string, shape: Shape = 'flat') => coat('Seal', mix, [120, 130, 140], {
  coats: 2, shape, interval: [120, 240], overcoat: [720, 5760], sanding: [720, 10080], flashOff: 15,
})

const fronts = (topcoat: string, gsm: DemoStep['gsm'], hours: number) => [
  prepare(), sealTwice('US-50'), wait(12), sand('P320'),
  coat('Topcoat', topcoat, gsm, { flashOff: 20 }),
  wait(hours), inspect,
]

export const schedules: readonly DemoSchedule[] = [
  {
    code: 'FS-10', name: 'Fronts in MDF, white satin',
    revisions: [
      { notes: 'First issue.', steps: fronts('AW-80', [100, 110, 120], 12) },
      { notes: 'Topcoat 120 instead of 110 g/m², dried 24 h before stacking.', steps: fronts('AW-80', [110, 120, 130], 24) },
    ],
  },
  { code: 'FS-12', name: 'Fronts in MDF, sage green satin', revisions: [{ steps: fronts('AS-10', [110, 125, 140], 24) }] },
  {
    code: 'FS-20', name: 'Oak veneer, smoked, clear matt',
    revisions: [{
      steps: [
        prepare('Sand veneer along the grain, blow off'),
        coat('Stain', 'ST-600', [25, 30, 35], { gsmIs: 'sprayed', overcoat: [60, 4320], flashOff: 10, doNotSand: true, cautions: 'Do not sand the stain: the seal comes first.' }),
        coat('Seal', 'US-40', [110, 120, 130], { overcoat: [720, 5760], sanding: [720, 10080], flashOff: 15 }),
        wait(12), sand('P320'),
        coat('Topcoat', 'AM-30', [90, 100, 110], { flashOff: 20 }),
        wait(12), inspect,
      ],
    }],
  },
  {
    code: 'FS-30', name: 'Counter tops, black full gloss',
    revisions: [{
      steps: [
        prepare(), sealTwice('US-40'), wait(12), sand('P380'),
        coat('Topcoat', 'AG-80', [130, 150, 150], { flashOff: 25, keepFromDraughts: true }),
        wait(24), inspect,
      ],
    }],
  },
  {
    code: 'FS-40', name: 'Shelving, nitro satin',
    revisions: [{
      steps: [
        prepare(), coat('Seal', 'NS-40', [140, 150, 160], { overcoat: [60, null], sanding: [60, null], flashOff: 10 }),
        sand('P320'), coat('Topcoat', 'NT-50', [110, 120, 130], { flashOff: 10 }),
        wait(8), inspect,
      ],
    }],
  },
  {
    code: 'FS-50', name: 'Children\'s furniture, waterborne warm white',
    revisions: [{
      steps: [
        prepare('Sand, wet once, sand again, blow off'),
        coat('Seal', 'WS-5', [100, 110, 120], { shape: 'frames', overcoat: [35, 480], sanding: [120, null], flashOff: 15, cautions: 'Overcoat when dust-free, from 35 min on.' }),
        coat('Topcoat', 'WW-10', [110, 120, 130], { shape: 'frames', flashOff: 20 }),
        wait(24), inspect,
      ],
    }],
  },
  {
    code: 'FS-55', name: 'Oak, waterborne clear matt',
    revisions: [{
      steps: [
        prepare('Sand, wet once, sand again, blow off'),
        coat('Seal', 'WS-10', [100, 110, 120], { overcoat: [240, 2880], sanding: [240, 7200], flashOff: 15 }),
        sand('P320'), coat('Topcoat', 'WT-10', [110, 120, 130], { flashOff: 20 }),
        wait(24), inspect,
      ],
    }],
  },
  {
    code: 'FS-60', name: 'Wall panels, textured graphite',
    revisions: [{
      steps: [
        prepare(), coat('Seal', 'US-50', [120, 130, 140], { overcoat: [720, 5760], sanding: [720, 10080], flashOff: 15 }),
        wait(12), sand('P320'),
        coat('Texture', 'TX-100', [180, 200, 220], { gsmIs: 'sprayed', maxBar: '1', doNotSand: true, layFlat: true, cautions: 'No more than 1 bar.' }),
        wait(24), inspect,
      ],
    }],
  },
  {
    code: 'FS-70', name: 'Display boxes, ivory crackle over walnut',
    revisions: [{
      steps: [
        prepare(), coat('Ground', 'NG-40', [110, 120, 130], { overcoat: [60, null], flashOff: 10 }),
        coat('Crackle', 'NC-15', [90, 100, 110], { passes: 2, overcoat: [90, 4320], doNotSand: true, keepFromDraughts: true, layFlat: true, cautions: '100 g/m² in total over two crossing passes.' }),
        coat('Glaze', 'GL-300', [10, 15, 20], { gsmIs: 'sprayed', overcoat: [45, 4320], doNotSand: true }),
        coat('Topcoat', 'NT-50', [100, 110, 120], { flashOff: 10 }),
        wait(12), inspect,
      ],
    }],
  },
  {
    code: 'FS-80', name: 'Display fronts, mirror effect',
    revisions: [{
      steps: [
        prepare(), coat('Seal', 'US-40', [120, 130, 140], { overcoat: [720, 5760], sanding: [720, 10080] }), wait(12), sand('P600'),
        coat('Gloss ground', 'AG-80', [130, 150, 150], { overcoat: [720, 7200], doNotSand: true, keepFromDraughts: true }), wait(12),
        coat('Mirror', 'MI-0', [25, 30, 35], { gsmIs: 'sprayed', overcoat: [360, 4320], doNotSand: true, layFlat: true, cautions: 'On unsanded gloss, 12 h old.' }),
        coat('Overcoat', 'AC-10', [100, 120, 130], { flashOff: 20 }),
        wait(24), inspect,
      ],
    }],
  },
  {
    code: 'FS-90', name: 'Stair parts, acid-curing satin',
    revisions: [{
      steps: [
        prepare(), coat('Seal', 'CV-10', [100, 110, 120], { shape: 'sticks', overcoat: [120, 4320], sanding: [120, null], flashOff: 15 }),
        sand('P320'), coat('Topcoat', 'CV-10', [110, 120, 130], { shape: 'sticks', flashOff: 15, cautions: 'Gives off formaldehyde while it dries: extraction on in the drying room.' }),
        wait(12), inspect,
      ],
    }],
  },
]

/** Each chemistry keeps to its booth, so that nothing clashes in ducts and filters. */
export function boothOf(chemistry: string): BoothKey {
  if (chemistry === 'waterborne') return 2
  if (chemistry === 'polyurethane' || chemistry === 'acrylic' || chemistry === 'polyester') return 1
  return 3
}
