import type { Dec } from './decimal'
import { LARGEST, ONE, floorTo, ofPercent, print, readCount, readNonNegative, readPercent, readPositive } from './decimal'
import { EngineError } from './error'
import type { Mix } from './mix'
import { componentAt } from './mix'
import type { WorkingLine } from './working'
import { line } from './working'

/** Whether the sheet's coat weight is meant on the panel or out of the gun. */
type FilmWeightIs = 'deposited' | 'sprayed'

/** Exactly one of `areaM2`, `totalG` and `available`. Decimals are plain strings. */
export interface AmountInput {
  areaM2?: string | undefined
  totalG?: string | undefined
  /** What is left of one component, in grams. */
  available?: { index: number, grams: string } | undefined
  /** Wet coat weight of one coat, g/m². Needed with an area. */
  filmWeightGsm?: string | undefined
  filmWeightIs?: FilmWeightIs | undefined
  coats?: number | undefined
  /** 0 < η ≤ 100. Needed where the coat weight is meant on the panel. */
  transferEfficiencyPct?: string | undefined
  /** Residue of one pot: hose, cup, filter. */
  reserveG?: string | undefined
  reservePct?: string | undefined
}

export interface Amount {
  /** Null where no coat weight is known. */
  areaM2: Dec | null
  depositedG: Dec | null
  sprayedG: Dec
  totalG: Dec
  working: WorkingLine[]
}

interface Film {
  /** Grams on the panel per square metre and for all coats; as the sheet means it. */
  gsmAllCoats: Dec
  /** Share of what leaves the gun that counts towards the coat weight: η, or 1 for `sprayed`. */
  counts: Dec
  gsm: Dec
  coats: number
  efficiencyPct: Dec | null
}

interface Reserve {
  residueG: Dec
  percent: Dec
}

const LARGEST_AREA = '1000000'
const LARGEST_FILM_WEIGHT = '100000'
const MOST_COATS = 50

/**
 * The amount to mix. deposited = area × wet coat weight × coats; sprayed = deposited ÷ η (`deposited`) or
 * deposited (`sprayed`); total = sprayed × (1 + reserve %) + residue.
 * @param divisionG what is left of a component counts down to the scale's division: no more can be poured
 * @throws EngineError `amount-ways`, `film-weight-missing`, `film-weight-meaning-missing`, `efficiency-missing`,
 * `residue-exceeds-total`, `too-little`, `too-large`
 */
export function readAmount(input: AmountInput, mix: Mix, divisionG: Dec): Amount {
  const amount = readWay(input, mix, divisionG)
  if (amount.totalG.gt(LARGEST)) {
    throw new EngineError('too-large', input.areaM2 === undefined ? 'available.grams' : 'areaM2', 'No shop mixes so much')
  }
  return amount
}

function readWay(input: AmountInput, mix: Mix, divisionG: Dec): Amount {
  const ways = [input.areaM2, input.totalG, input.available].filter(way => way !== undefined)
  if (ways.length !== 1) {
    throw new EngineError('amount-ways', 'areaM2', 'Give one of area, total grams and what is left of a component')
  }
  const reserve = readReserve(input)
  const film = readFilm(input)
  if (input.areaM2 !== undefined) {
    return byArea(readPositive(input.areaM2, 'areaM2', LARGEST_AREA), needFilm(film), reserve)
  }
  if (input.totalG !== undefined) return byTotal(readPositive(input.totalG, 'totalG'), film, reserve, [])
  const { index, grams } = input.available ?? { index: 0, grams: '' }
  return byAvailable(mix, index, grams, divisionG, film, reserve)
}

/**
 * Square metres that a pot covers: (total − residue) ÷ (1 + reserve %) × counted share ÷ (coat weight × coats).
 * @throws EngineError as {@link readAmount}
 */
export function coveredAreaM2(input: Omit<AmountInput, 'areaM2' | 'available'> & { totalG: string }): string {
  const amount = byTotal(readPositive(input.totalG, 'totalG'), needFilm(readFilm(input)), readReserve(input), [])
  if (amount.areaM2 === null) throw missingFilm()
  return print(amount.areaM2)
}

function byArea(areaM2: Dec, film: Film, reserve: Reserve): Amount {
  const depositedG = areaM2.times(film.gsmAllCoats)
  const sprayedG = depositedG.div(film.counts)
  const totalG = sprayedG.times(ONE.plus(ofPercent(reserve.percent))).plus(reserve.residueG)
  return {
    areaM2,
    depositedG,
    sprayedG,
    totalG,
    working: [
      line(film.efficiencyPct === null ? 'coat weight, out of the gun' : 'on the panel',
        `${print(areaM2)} m² × ${print(film.gsm)} g/m² × ${film.coats}`, depositedG, 'g'),
      ...(film.efficiencyPct === null
        ? []
        : [line('out of the gun', `${print(depositedG)} g ÷ ${print(film.efficiencyPct)} %`, sprayedG, 'g')]),
      totalLine(sprayedG, totalG, reserve),
    ],
  }
}

function byTotal(totalG: Dec, film: Film | null, reserve: Reserve, before: WorkingLine[]): Amount {
  if (totalG.lte(reserve.residueG)) {
    throw new EngineError('residue-exceeds-total', 'reserveG', 'The residue alone is as much as the whole pot')
  }
  const sprayedG = totalG.minus(reserve.residueG).div(ONE.plus(ofPercent(reserve.percent)))
  const sprayedLine = line('out of the gun',
    `(${print(totalG)} g − ${print(reserve.residueG)} g) ÷ (1 + ${print(reserve.percent)} %)`, sprayedG, 'g')
  if (film === null) return { areaM2: null, depositedG: null, sprayedG, totalG, working: [...before, sprayedLine] }
  const depositedG = sprayedG.times(film.counts)
  const areaM2 = depositedG.div(film.gsmAllCoats)
  return {
    areaM2,
    depositedG,
    sprayedG,
    totalG,
    working: [
      ...before,
      sprayedLine,
      ...(film.efficiencyPct === null
        ? []
        : [line('on the panel', `${print(sprayedG)} g × ${print(film.efficiencyPct)} %`, depositedG, 'g')]),
      line('area it covers', `${print(depositedG)} g ÷ (${print(film.gsm)} g/m² × ${film.coats})`, areaM2, 'm²'),
    ],
  }
}

function byAvailable(
  mix: Mix, index: number, grams: string, divisionG: Dec, film: Film | null, reserve: Reserve,
): Amount {
  const component = componentAt(mix, index, 'available.index')
  const given = readPositive(grams, 'available.grams')
  const pourableG = floorTo(given, divisionG)
  if (pourableG.lte(0)) {
    throw new EngineError('too-little', 'available.grams', 'Less is left than the scale can show')
  }
  const totalG = pourableG.times(mix.totalWeightParts).div(component.weightParts)
  return byTotal(totalG, film, reserve, [
    line(`${component.name}, down to the scale's division`, `${print(given)} g`, pourableG, 'g'),
    line('largest batch',
      `${print(pourableG)} g × ${print(mix.totalWeightParts)} ÷ ${print(component.weightParts)}`, totalG, 'g'),
  ])
}

function totalLine(sprayedG: Dec, totalG: Dec, { residueG, percent }: Reserve): WorkingLine {
  return line('to mix', `${print(sprayedG)} g × (1 + ${print(percent)} %) + ${print(residueG)} g`, totalG, 'g')
}

function readReserve(input: AmountInput): Reserve {
  return {
    residueG: readNonNegative(input.reserveG ?? '0', 'reserveG'),
    percent: readNonNegative(input.reservePct ?? '0', 'reservePct', '1000'),
  }
}

function readFilm(input: AmountInput): Film | null {
  const efficiencyPct = input.transferEfficiencyPct === undefined
    ? null
    : readPercent(input.transferEfficiencyPct, 'transferEfficiencyPct', true)
  if (input.filmWeightGsm === undefined) return null
  const gsm = readPositive(input.filmWeightGsm, 'filmWeightGsm', LARGEST_FILM_WEIGHT)
  const coats = readCount(input.coats ?? 1, 'coats', MOST_COATS)
  if (input.filmWeightIs === undefined) {
    throw new EngineError('film-weight-meaning-missing', 'filmWeightIs', 'Say whether the coat weight is meant on the panel or out of the gun')
  }
  if (input.filmWeightIs === 'sprayed') {
    return { gsmAllCoats: gsm.times(coats), counts: ONE, gsm, coats, efficiencyPct: null }
  }
  if (efficiencyPct === null) {
    throw new EngineError('efficiency-missing', 'transferEfficiencyPct', 'A coat weight on the panel needs the gun\'s transfer efficiency')
  }
  return { gsmAllCoats: gsm.times(coats), counts: ofPercent(efficiencyPct), gsm, coats, efficiencyPct }
}

function needFilm(film: Film | null): Film {
  if (film === null) throw missingFilm()
  return film
}

function missingFilm(): EngineError {
  return new EngineError('film-weight-missing', 'filmWeightGsm', 'An area needs the wet coat weight')
}
