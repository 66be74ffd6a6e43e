import type { Dec } from './decimal'
import { HUNDRED, ONE, floorTo, ofPercent, print, readNonNegative, readPercent, readPositive, sum } from './decimal'
import { EngineError } from './error'

/** One component of what is applied. Decimals are plain strings. */
export interface EmissionsComponentInput {
  massG: string
  densityGPerMl: string
  /** By weight. */
  solidsPct: string
  /** Share of its VOC that reacts into the film instead of evaporating, per cent. */
  reactsPct?: string | undefined
  /** Exactly one of `vocGPerL` and `vocPct` (by weight). */
  vocGPerL?: string | undefined
  vocPct?: string | undefined
  /** By weight. */
  waterPct?: string | undefined
  exemptPct?: string | undefined
}

export interface EmissionsInput {
  components: readonly EmissionsComponentInput[]
  /** 0.998 g/mL at 20 °C where not given. */
  waterDensityGPerMl?: string | undefined
  /** Of the exempt solvent; 0.79 g/mL where not given (acetone; common practice, no source). */
  exemptDensityGPerMl?: string | undefined
}

export interface EmissionsAnswer {
  densityGPerMl: string
  solidsPct: string
  vocGPerL: string
  vocLessWaterGPerL: string
  /** Null where nothing is solid. */
  kgVocPerKgSolids: string | null
  vocG: string
}

interface Part {
  massG: Dec
  volumeMl: Dec
  solidsG: Dec
  vocG: Dec
  waterG: Dec
  exemptG: Dec
}

const MOST_COMPONENTS = 50
const DEFAULT_WATER_DENSITY = '0.998'
const DEFAULT_EXEMPT_DENSITY = '0.79'

/**
 * VOC as applied = ΣVOC ÷ ΣV; less water and exempt = ΣVOC ÷ (ΣV − V_water − V_exempt). Volumes are taken to add up;
 * weight per cents are never averaged by volume.
 * @throws EngineError `components-count`, `voc-ways`, `over-100-percent`, `only-water`
 */
export function calculateEmissions(input: EmissionsInput): EmissionsAnswer {
  if (input.components.length < 1 || input.components.length > MOST_COMPONENTS) {
    throw new EngineError('components-count', 'components', `Give 1 to ${MOST_COMPONENTS} components`)
  }
  const parts = input.components.map((component, index) => readPart(component, `components.${index}`))
  const total = (of: (part: Part) => Dec): Dec => sum(parts.map(of))
  const volumeMl = total(part => part.volumeMl)
  const vocG = total(part => part.vocG)
  const solidsG = total(part => part.solidsG)
  const waterMl = total(part => part.waterG)
    .div(readPositive(input.waterDensityGPerMl ?? DEFAULT_WATER_DENSITY, 'waterDensityGPerMl', '30'))
  const exemptMl = total(part => part.exemptG)
    .div(readPositive(input.exemptDensityGPerMl ?? DEFAULT_EXEMPT_DENSITY, 'exemptDensityGPerMl', '30'))
  const countedMl = volumeMl.minus(waterMl).minus(exemptMl)
  if (countedMl.lte(0)) {
    throw new EngineError('only-water', 'components', 'Nothing is left beside water and exempt solvent')
  }
  const massG = total(part => part.massG)
  return {
    densityGPerMl: print(massG.div(volumeMl)),
    solidsPct: print(solidsG.times(HUNDRED).div(massG)),
    vocGPerL: print(vocG.times(1000).div(volumeMl)),
    vocLessWaterGPerL: print(vocG.times(1000).div(countedMl)),
    kgVocPerKgSolids: solidsG.isZero() ? null : print(vocG.div(solidsG)),
    vocG: print(vocG),
  }
}

function readPart(input: EmissionsComponentInput, field: string): Part {
  const massG = readPositive(input.massG, `${field}.massG`)
  const volumeMl = massG.div(readPositive(input.densityGPerMl, `${field}.densityGPerMl`, '30'))
  const solids = readPercent(input.solidsPct, `${field}.solidsPct`)
  const water = readPercent(input.waterPct ?? '0', `${field}.waterPct`)
  const exempt = readPercent(input.exemptPct ?? '0', `${field}.exemptPct`)
  const volatileG = readVocG(input, massG, volumeMl, field)
  const fixed = solids.plus(water).plus(exempt)
  if (fixed.gt(HUNDRED) || (input.vocPct !== undefined && fixed.plus(input.vocPct).gt(HUNDRED)) || volatileG.gt(massG)) {
    throw new EngineError('over-100-percent', `${field}.solidsPct`, 'Solids, VOC, water and exempt solvent are more than the whole')
  }
  const reactedG = volatileG.times(ofPercent(readPercent(input.reactsPct ?? '0', `${field}.reactsPct`)))
  return {
    massG,
    volumeMl,
    solidsG: massG.times(ofPercent(solids)).plus(reactedG),
    vocG: volatileG.minus(reactedG),
    waterG: massG.times(ofPercent(water)),
    exemptG: massG.times(ofPercent(exempt)),
  }
}

function readVocG(input: EmissionsComponentInput, massG: Dec, volumeMl: Dec, field: string): Dec {
  if ((input.vocGPerL === undefined) === (input.vocPct === undefined)) {
    throw new EngineError('voc-ways', `${field}.vocGPerL`, 'Give the VOC either in g/L or in per cent by weight')
  }
  if (input.vocPct !== undefined) return massG.times(ofPercent(readPercent(input.vocPct, `${field}.vocPct`)))
  return volumeMl.times(readNonNegative(input.vocGPerL ?? '', `${field}.vocGPerL`, '30000')).div(1000)
}

/** Emitted = solvent in what was mixed and used for cleaning − in recorded waste. All in grams of VOC. */
export function emittedVocG(input: { mixedG: string, cleaningG: string, wasteG: string }): string {
  const used = readNonNegative(input.mixedG, 'mixedG').plus(readNonNegative(input.cleaningG, 'cleaningG'))
  const waste = readNonNegative(input.wasteG, 'wasteG')
  if (waste.gt(used)) {
    throw new EngineError('waste-over-use', 'wasteG', 'More solvent is recorded as waste than was used')
  }
  return print(used.minus(waste))
}

/** Twelve-month rolling sums; `monthlyG` oldest first, no month left out. Entry i sums months i − 11 to i. */
export function rollingTwelveMonthsG(monthlyG: readonly string[]): string[] {
  const months = monthlyG.map((grams, index) => readNonNegative(grams, `monthlyG.${index}`))
  return months.map((_, index) => print(sum(months.slice(index < 11 ? 0 : index - 11, index + 1))))
}

/**
 * Most thinner that keeps a mix under a limit: (L·V − E) ÷ (VOCt − L), rounded down to `stepL`.
 * Null where the thinner itself is under the limit: it never breaks it.
 * @throws EngineError `already-over-limit`
 */
export function mostThinnerL(input: {
  limitGPerL: string
  volumeL: string
  vocG: string
  thinnerVocGPerL: string
  stepL: string
}): string | null {
  const limit = readPositive(input.limitGPerL, 'limitGPerL')
  const room = limit.times(readPositive(input.volumeL, 'volumeL')).minus(readNonNegative(input.vocG, 'vocG'))
  if (room.lt(0)) throw new EngineError('already-over-limit', 'vocG', 'The mix is over the limit before thinning')
  const excess = readNonNegative(input.thinnerVocGPerL, 'thinnerVocGPerL').minus(limit)
  if (excess.lte(0)) return null
  return print(floorTo(room.div(excess), readPositive(input.stepL, 'stepL')))
}

/**
 * Average content of hazardous air pollutant, kg per kg of solids: (Σ Mc·Cc + Σ S·W) ÷ Σ Mc.
 * 40 CFR 63.804(a)(1) Eq. 1.
 * @throws EngineError `no-solids`
 */
export function hapPerKgSolids(
  coatings: readonly { solidsKg: string, hapKgPerKgSolids: string }[],
  thinners: readonly { massKg: string, hapShare: string }[],
): string {
  const solids = sum(coatings.map(({ solidsKg }, index) => readPositive(solidsKg, `coatings.${index}.solidsKg`)))
  if (solids.isZero()) throw new EngineError('no-solids', 'coatings', 'Nothing is solid')
  const inCoatings = coatings.map(({ solidsKg, hapKgPerKgSolids }, index) =>
    readNonNegative(hapKgPerKgSolids, `coatings.${index}.hapKgPerKgSolids`).times(solidsKg))
  const inThinners = thinners.map(({ massKg, hapShare }, index) =>
    readNonNegative(massKg, `thinners.${index}.massKg`)
      .times(readNonNegative(hapShare, `thinners.${index}.hapShare`, ONE)))
  return print(sum([...inCoatings, ...inThinners]).div(solids))
}

/** Reduction by a control, per cent: (before − after) ÷ before. 40 CFR 63.804. */
export function reductionPct(before: string, after: string): string {
  const from = readPositive(before, 'before')
  return print(from.minus(readNonNegative(after, 'after')).times(HUNDRED).div(from))
}

/** Compared in the unit the rule states; equal is within. */
export function withinLimit(value: string, limit: string): boolean {
  return readNonNegative(value, 'value').lte(readNonNegative(limit, 'limit'))
}
