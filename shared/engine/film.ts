import type { Dec } from './decimal'
import { HUNDRED, print, readNonNegative, readPercent, readPositive } from './decimal'
import { EngineError } from './error'

/** Exactly one of `dryUm`, `wetUm` and `filmWeightGsm`. Decimals are plain strings. */
export interface FilmInput {
  /** Of the mix as applied, g/mL. */
  densityGPerMl: string
  /** Of the unthinned material, per cent. */
  volumeSolidsPct: string
  /** On the unthinned material. */
  thinnerPctByVolume?: string | undefined
  dryUm?: string | undefined
  wetUm?: string | undefined
  filmWeightGsm?: string | undefined
}

export interface FilmAnswer {
  wetUm: string
  dryUm: string
  filmWeightGsm: string
  volumeSolidsAppliedPct: string
  /** Theoretical, of the material as applied. */
  spreadingRateM2PerL: string
}

const MOST_UM = '100000'

/**
 * Wet, dry and weight of one film: wet = dry ÷ volume solids as applied; g/m² = wet × ρ (1 µm on 1 m² is 1 mL);
 * VS′ = VS·100 ÷ (100 + t); spreading rate = 10·VS′ ÷ dry.
 * @throws EngineError `film-ways`
 */
export function calculateFilm(input: FilmInput): FilmAnswer {
  const density = readPositive(input.densityGPerMl, 'densityGPerMl', '30')
  const solids = volumeSolidsAppliedPct(
    readPercent(input.volumeSolidsPct, 'volumeSolidsPct', true),
    readNonNegative(input.thinnerPctByVolume ?? '0', 'thinnerPctByVolume', '10000'),
  )
  const wet = readWet(input, density, solids)
  const dry = wet.times(solids).div(HUNDRED)
  return {
    wetUm: print(wet),
    dryUm: print(dry),
    filmWeightGsm: print(wet.times(density)),
    volumeSolidsAppliedPct: print(solids),
    spreadingRateM2PerL: print(HUNDRED.times(10).div(wet)),
  }
}

/** VS·100 ÷ (100 + t), t in per cent by volume on the unthinned material. */
function volumeSolidsAppliedPct(volumeSolidsPct: Dec, thinnerPct: Dec): Dec {
  return volumeSolidsPct.times(HUNDRED).div(HUNDRED.plus(thinnerPct))
}

function readWet(input: FilmInput, density: Dec, solids: Dec): Dec {
  const ways = [input.dryUm, input.wetUm, input.filmWeightGsm].filter(way => way !== undefined)
  if (ways.length !== 1) {
    throw new EngineError('film-ways', 'dryUm', 'Give one of dry film, wet film and coat weight')
  }
  if (input.wetUm !== undefined) return readPositive(input.wetUm, 'wetUm', MOST_UM)
  if (input.filmWeightGsm !== undefined) return readPositive(input.filmWeightGsm, 'filmWeightGsm', MOST_UM).div(density)
  return readPositive(input.dryUm ?? '', 'dryUm', MOST_UM).times(HUNDRED).div(solids)
}
