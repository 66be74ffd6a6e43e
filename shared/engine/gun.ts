import { HUNDRED, ofPercent, print, readCount, readNonNegative, readPercent, readPositive } from './decimal'
import { EngineError } from './error'

/** Weigh test of a gun. Decimals are plain strings in grams. */
export interface WeighTest {
  /** What the panel gained: of solids, or of wet material for the wet variant. */
  gainG: string
  /** What left the gun, liquid. */
  usedG: string
  /** Solids by weight of what left the gun, per cent. Missing: the wet variant, solvent lost on the way is not seen. */
  solidsPct?: string | undefined
}

export interface MeasuredEfficiency {
  transferEfficiencyPct: string
  /** The wet variant is an estimate. */
  estimate: boolean
}

/**
 * η = solids gained by the panel ÷ solids that left the gun (after ASTM D5286).
 * @throws EngineError `gained-more-than-left`
 */
export function measuredEfficiency({ gainG, usedG, solidsPct }: WeighTest): MeasuredEfficiency {
  const used = readPositive(usedG, 'usedG')
  const left = solidsPct === undefined ? used : used.times(ofPercent(readPercent(solidsPct, 'solidsPct', true)))
  const gain = readPositive(gainG, 'gainG')
  if (gain.gt(left)) {
    throw new EngineError('gained-more-than-left', 'gainG', 'The panel cannot gain more than left the gun')
  }
  return { transferEfficiencyPct: print(gain.times(HUNDRED).div(left)), estimate: solidsPct === undefined }
}

/**
 * Coat weight that arrived, g/m² a coat: (mixed − leftover − washed out) × η ÷ (area × coats). η comes from a weigh
 * test of its own: both cannot be found from the same numbers.
 * @throws EngineError `more-left-than-mixed`
 */
export function arrivedCoatWeightGsm(input: {
  mixedG: string
  leftoverG: string
  washedOutG: string
  transferEfficiencyPct: string
  areaM2: string
  coats: number
}): string {
  const sprayed = readPositive(input.mixedG, 'mixedG')
    .minus(readNonNegative(input.leftoverG, 'leftoverG'))
    .minus(readNonNegative(input.washedOutG, 'washedOutG'))
  if (sprayed.lt(0)) {
    throw new EngineError('more-left-than-mixed', 'leftoverG', 'More is left and washed out than was mixed')
  }
  const covered = readPositive(input.areaM2, 'areaM2').times(readCount(input.coats, 'coats', 50))
  return print(sprayed.times(ofPercent(readPercent(input.transferEfficiencyPct, 'transferEfficiencyPct', true))).div(covered))
}

/** What of a spend is blown past the work: spend × (1 − η). */
export function oversprayOf(spend: string, transferEfficiencyPct: string): string {
  const missed = HUNDRED.minus(readPercent(transferEfficiencyPct, 'transferEfficiencyPct'))
  return print(readNonNegative(spend, 'spend').times(ofPercent(missed)))
}
