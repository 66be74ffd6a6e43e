import * as z from 'zod/mini'
import { Figure, MinutesText } from './calculation-fields'
import { WorkingLine } from './common'
import { DecimalText, words } from './fields'
import { ComponentRole } from './material-roles'

const Index = z.int('Give a whole number.').check(z.minimum(0, 'Counted from 0.'), z.maximum(7, 'A mix has at most 8 components.'))
const Coats = z.int('Give a whole number.').check(z.minimum(1, 'At least one coat.'), z.maximum(50, 'At most 50 coats.'))

const component = z.strictObject({
  name: words(120),
  parts: DecimalText,
  partsMax: z.optional(DecimalText),
  sheetMaxParts: z.optional(DecimalText),
  densityGPerMl: z.optional(DecimalText),
  role: z.optional(ComponentRole),
  tolerancePct: z.optional(DecimalText),
  reactive: z.optional(z.boolean()),
})

/** A mix as every calculation takes it. */
const CalculationMix = z.strictObject({
  basis: z.enum(['weight', 'volume'], 'By weight or by volume.'),
  components: z.array(component, 'List the components.').check(z.minLength(1, 'A mix has 1 to 8 components.'), z.maxLength(8, 'A mix has 1 to 8 components.')),
})

const batchComponent = z.object({
  name: z.string(),
  parts: Figure,
  sharePct: Figure,
  exactG: Figure,
  targetG: Figure,
  runningTotalG: Figure,
  ratioErrorPct: z.nullable(Figure),
  volumeMl: z.nullable(Figure),
})

export const BatchCalculationBody = z.strictObject({
  mix: CalculationMix,
  areaM2: z.optional(DecimalText),
  totalG: z.optional(DecimalText),
  available: z.optional(z.strictObject({ index: Index, grams: DecimalText })),
  filmWeightGsm: z.optional(DecimalText),
  filmWeightIs: z.optional(z.enum(['deposited', 'sprayed'], 'On the panel or out of the gun.')),
  coats: z.optional(Coats),
  transferEfficiencyPct: z.optional(DecimalText),
  reserveG: z.optional(DecimalText),
  reservePct: z.optional(DecimalText),
  scaleDivisionG: DecimalText,
  scaleMpeG: z.optional(DecimalText),
})
export type BatchCalculationBody = z.infer<typeof BatchCalculationBody>

export const BatchCalculationAnswer = z.object({
  depositedG: z.nullable(Figure),
  sprayedG: Figure,
  exactTotalG: Figure,
  targetTotalG: Figure,
  tooSmallForScale: z.boolean(),
  smallestTotalG: z.nullable(Figure),
  components: z.array(batchComponent),
  working: z.array(WorkingLine),
})

export const PourCalculationBody = z.strictObject({
  mix: CalculationMix,
  scaleDivisionG: DecimalText,
  scaleMpeG: z.optional(DecimalText),
  targetTotalG: DecimalText,
  poured: z.array(z.strictObject({ index: Index, pouredG: DecimalText }), 'List what is poured.').check(z.maxLength(8, 'A mix has at most 8 components.')),
  cupCapacityG: z.optional(DecimalText),
  kept: z.optional(z.array(Index).check(z.maxLength(8, 'A mix has at most 8 components.'))),
})

export const PourCalculationAnswer = z.object({
  components: z.array(z.object({
    targetG: Figure,
    pouredG: z.nullable(Figure),
    deviationPct: z.nullable(Figure),
    verdict: z.nullable(z.enum(['short', 'in-tolerance', 'too-much', 'cannot-tell'])),
    newTargetG: Figure,
    addG: Figure,
    lowG: Figure,
    highG: Figure,
    uncertaintyG: Figure,
    tooSmallForScale: z.boolean(),
  })),
  correctionNeeded: z.boolean(),
  newTotalG: Figure,
  extraG: Figure,
  fits: z.boolean(),
  cause: z.nullable(z.enum(['reactive-too-much', 'thinner-too-much', 'short-at-end'])),
  keep: z.nullable(z.object({ index: z.number(), partsAsPoured: Figure, withinSheet: z.nullable(z.boolean()) })),
  tooCoarseForScale: z.boolean(),
  complete: z.boolean(),
})

export const FilmCalculationBody = z.strictObject({
  densityGPerMl: DecimalText,
  volumeSolidsPct: DecimalText,
  thinnerPctByVolume: z.optional(DecimalText),
  dryUm: z.optional(DecimalText),
  wetUm: z.optional(DecimalText),
  filmWeightGsm: z.optional(DecimalText),
})

export const FilmCalculationAnswer = z.object({
  wetUm: Figure,
  dryUm: Figure,
  filmWeightGsm: Figure,
  volumeSolidsAppliedPct: Figure,
  spreadingRateM2PerL: Figure,
})

export const PotsCalculationBody = z.strictObject({
  mix: CalculationMix,
  sprayG: DecimalText,
  residueG: DecimalText,
  areaM2: DecimalText,
  pieceAreasM2: z.optional(z.array(DecimalText).check(z.maxLength(5000, 'At most 5000 pieces at once.'))),
  cupCapacityG: DecimalText,
  scaleDivisionG: DecimalText,
  scaleCapacityG: z.optional(DecimalText),
  paceM2PerH: z.optional(DecimalText),
  gunFlowGPerMin: z.optional(DecimalText),
  potLifeMin: z.optional(MinutesText),
  lateFromPct: z.optional(DecimalText),
  inductionMin: z.optional(MinutesText),
  mixToSprayMin: z.optional(MinutesText),
  coats: z.optional(Coats),
  coatIntervalMin: z.optional(MinutesText),
})

export const PotsCalculationAnswer = z.object({
  pots: z.array(z.object({
    totalG: Figure,
    exactTotalG: Figure,
    areaM2: Figure,
    fromPiece: z.optional(z.number()),
    toPiece: z.optional(z.number()),
    coat: z.optional(z.number()),
    components: z.array(batchComponent),
    tooSmallForScale: z.boolean(),
    startsAfterMin: z.nullable(Figure),
  })),
  boundBy: z.enum(['cup', 'pot-life', 'scale', 'one-pot']),
  cautions: z.array(z.enum(['pace-unknown', 'flow-only'])),
})

export const EmissionsCalculationBody = z.strictObject({
  components: z.array(z.strictObject({
    massG: DecimalText,
    densityGPerMl: DecimalText,
    solidsPct: DecimalText,
    reactsPct: z.optional(DecimalText),
    vocGPerL: z.optional(DecimalText),
    vocPct: z.optional(DecimalText),
    waterPct: z.optional(DecimalText),
    exemptPct: z.optional(DecimalText),
  }), 'List the components.').check(z.minLength(1, 'Give 1 to 50 components.'), z.maxLength(50, 'Give 1 to 50 components.')),
  waterDensityGPerMl: z.optional(DecimalText),
  exemptDensityGPerMl: z.optional(DecimalText),
})

export const EmissionsCalculationAnswer = z.object({
  densityGPerMl: Figure,
  solidsPct: Figure,
  vocGPerL: Figure,
  vocLessWaterGPerL: Figure,
  kgVocPerKgSolids: z.nullable(Figure),
  vocG: Figure,
})
