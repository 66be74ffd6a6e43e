import type { BatchComponent } from './batch'
import { printTargets } from './batch'
import type { Dec } from './decimal'
import { ZERO, print, readCount, readNonNegative, readPositive, sum } from './decimal'
import { EngineError } from './error'
import type { Mix, MixInput } from './mix'
import { hasPotLife, readMix } from './mix'
import type { Pace } from './pots-life'
import { readPace, spanMin, usableMin } from './pots-life'
import type { Portion } from './pots-split'
import { divideEqually, divideOnBorders } from './pots-split'
import type { Scale } from './scale'
import { canWeigh, readScale } from './scale'
import { targetTotalOf, targetsOf } from './targets'

/** A whole coat to be divided into pots. Decimals are plain strings. */
export interface PotsInput {
  mix: MixInput
  /** To leave the gun, residue not counted. For all coats where there are several. */
  sprayG: string
  /** Lost in every pot: hose, cup, filter. */
  residueG: string
  areaM2: string
  /** Areas in racking order; pots then end on piece borders. */
  pieceAreasM2?: readonly string[] | undefined
  cupCapacityG: string
  scaleDivisionG: string
  scaleCapacityG?: string | undefined
  /** With loading, turning and racking. */
  paceM2PerH?: string | undefined
  /** A lower bound of the time only; used while no pace is known. */
  gunFlowGPerMin?: string | undefined
  /** Missing for a mix without a pot life. */
  potLifeMin?: string | undefined
  lateFromPct?: string | undefined
  inductionMin?: string | undefined
  mixToSprayMin?: string | undefined
  coats?: number | undefined
  /** From the first spray of one coat to that of the next. */
  coatIntervalMin?: string | undefined
}

/** The bound that asked for the most pots; with equals cup before pot life before scale. */
export type PotBound = 'cup' | 'pot-life' | 'scale' | 'one-pot'

export interface PlannedPot {
  /** Sum of its targets. */
  totalG: string
  exactTotalG: string
  areaM2: string
  /** Position of its first and last piece, from 0. Missing without pieces. */
  fromPiece?: number
  toPiece?: number
  /** From 1; missing where one pot serves all coats. */
  coat?: number
  components: BatchComponent[]
  tooSmallForScale: boolean
  /** When to mix it, after the first pot; null while no pace is known. */
  startsAfterMin: string | null
}

/** `pace-unknown`: pot life could not bound the plan. `flow-only`: its time is a lower bound. */
export type PotsCaution = 'pace-unknown' | 'flow-only'

export interface PotsAnswer {
  pots: PlannedPot[]
  boundBy: PotBound
  cautions: PotsCaution[]
}

interface Plan {
  mix: Mix
  scale: Scale
  sprayG: Dec
  residueG: Dec
  areaM2: Dec
  cupG: Dec
  usable: Dec | null
  pace: Pace
  coats: number
  intervalMin: Dec
}

const MOST_PIECES = 5_000
const MOST_COATS = 50
/** An area on a form is rounded once; the pieces' own sum is exact. */
const AREA_ROUNDING = '0.01'

/**
 * The fewest pots that each fit cup, scale and usable life. With pieces they end on piece borders, as even as the
 * borders allow; else they are equal. Coats further apart than a pot lives are mixed per coat.
 * @throws EngineError `pot-too-small`, `piece-too-large`, `areas-differ`, `no-usable-life`, `too-many-pots`
 */
export function calculatePots(input: PotsInput): PotsAnswer {
  const plan = readPlan(input)
  const pieces = readPieces(input.pieceAreasM2, plan.areaM2)
  const perCoat = mixedPerCoat(plan)
  const part: Plan = perCoat
    ? { ...plan, sprayG: plan.sprayG.div(plan.coats), coats: 1 }
    : plan
  const exact = pieces === null ? part : { ...part, areaM2: sum(pieces) }
  const portions = divide(exact, pieces, fitsAll)
  const once = layOut(exact, portions)
  const pots = perCoat ? repeatPerCoat(once, exact, plan) : once
  return {
    pots,
    boundBy: portions.length === 1 ? 'one-pot' : decidingBound(exact, pieces),
    cautions: cautionsOf(exact),
  }
}

function readPlan(input: PotsInput): Plan {
  const mix = readMix(input.mix)
  if (input.potLifeMin === undefined && hasPotLife(mix)) {
    throw new EngineError('pot-life-missing', 'potLifeMin', 'A mix with a reactive component needs its pot life')
  }
  return {
    mix,
    scale: readScale({ divisionG: input.scaleDivisionG, capacityG: input.scaleCapacityG }),
    sprayG: readPositive(input.sprayG, 'sprayG'),
    residueG: readNonNegative(input.residueG, 'residueG'),
    areaM2: readPositive(input.areaM2, 'areaM2'),
    cupG: readPositive(input.cupCapacityG, 'cupCapacityG'),
    usable: usableMin(input),
    pace: readPace(input),
    coats: readCount(input.coats ?? 1, 'coats', MOST_COATS),
    intervalMin: readNonNegative(input.coatIntervalMin ?? '0', 'coatIntervalMin'),
  }
}

function readPieces(texts: readonly string[] | undefined, areaM2: Dec): Dec[] | null {
  if (texts === undefined || texts.length === 0) return null
  if (texts.length > MOST_PIECES) {
    throw new EngineError('too-many-pieces', 'pieceAreasM2', `At most ${MOST_PIECES} pieces at once`)
  }
  const pieces = texts.map((text, index) => readPositive(text, `pieceAreasM2.${index}`))
  if (sum(pieces).minus(areaM2).abs().gt(AREA_ROUNDING)) {
    throw new EngineError('areas-differ', 'pieceAreasM2', 'The pieces do not add up to the area')
  }
  return pieces
}

/** Exact grams of a pot: its share of the spray, and a residue of its own. */
function exactOf(plan: Plan, areaM2: Dec): Dec {
  return plan.sprayG.times(areaM2).div(plan.areaM2).plus(plan.residueG)
}

function targetTotal(plan: Plan, areaM2: Dec): Dec {
  return targetTotalOf(targetsOf(plan.mix, exactOf(plan, areaM2), plan.scale))
}

/** Minutes from the first to the last spray of a pot; null while neither pace nor flow is known. */
function sprayMinutes(plan: Plan, areaM2: Dec): Dec | null {
  const grams = plan.sprayG.times(areaM2).div(plan.areaM2)
  return spanMin(plan.pace, areaM2, grams, plan.coats, plan.intervalMin)
}

function fitsCup(plan: Plan, areaM2: Dec): boolean {
  return targetTotal(plan, areaM2).lte(plan.cupG)
}

function fitsScale(plan: Plan, areaM2: Dec): boolean {
  return canWeigh(plan.scale, targetTotal(plan, areaM2))
}

function fitsLife(plan: Plan, areaM2: Dec): boolean {
  const minutes = sprayMinutes(plan, areaM2)
  return plan.usable === null || minutes === null || minutes.lte(plan.usable)
}

function fitsAll(plan: Plan, areaM2: Dec): boolean {
  return fitsCup(plan, areaM2) && fitsScale(plan, areaM2) && fitsLife(plan, areaM2)
}

function divide(plan: Plan, pieces: Dec[] | null, fits: (plan: Plan, areaM2: Dec) => boolean): Portion[] {
  const fitsArea = (areaM2: Dec): boolean => fits(plan, areaM2)
  return pieces === null ? divideEqually(plan.areaM2, fitsArea) : divideOnBorders(pieces, fitsArea)
}

function decidingBound(plan: Plan, pieces: Dec[] | null): PotBound {
  const bounds: [PotBound, typeof fitsAll][] = [['cup', fitsCup], ['pot-life', fitsLife], ['scale', fitsScale]]
  const asked = bounds.map(([bound, fits]) => ({ bound, count: divide(plan, pieces, fits).length }))
  return asked.reduce((most, next) => (next.count > most.count ? next : most)).bound
}

/** One pot for all coats only where it lives long enough from the first coat to the start of the last. */
function mixedPerCoat({ coats, intervalMin, usable }: Plan): boolean {
  return coats > 1 && usable !== null && intervalMin.times(coats - 1).gte(usable)
}

function layOut(plan: Plan, portions: readonly Portion[]): PlannedPot[] {
  let startsAfter: Dec | null = ZERO
  return portions.map(({ areaM2, ...borders }) => {
    const exactG = exactOf(plan, areaM2)
    const targets = targetsOf(plan.mix, exactG, plan.scale)
    const pot = {
      totalG: print(targetTotalOf(targets)),
      exactTotalG: print(exactG),
      areaM2: print(areaM2),
      ...borders,
      components: printTargets(plan.mix, targets),
      tooSmallForScale: targets.some(({ fitness }) => fitness === 'too-small'),
      startsAfterMin: startsAfter === null ? null : print(startsAfter),
    }
    const minutes = sprayMinutes(plan, areaM2)
    startsAfter = startsAfter === null || minutes === null ? null : startsAfter.plus(minutes)
    return pot
  })
}

/** Every coat with pots of its own, mixed when that coat begins. */
function repeatPerCoat(once: readonly PlannedPot[], plan: Plan, { coats, intervalMin }: Plan): PlannedPot[] {
  const coatMin = sprayMinutes(plan, plan.areaM2)
  const step = coatMin === null || coatMin.gt(intervalMin) ? coatMin : intervalMin
  return Array.from({ length: coats }, (_, index) => once.map(pot => ({
    ...pot,
    coat: index + 1,
    startsAfterMin: step === null || pot.startsAfterMin === null
      ? null
      : print(step.times(index).plus(pot.startsAfterMin)),
  }))).flat()
}

function cautionsOf({ usable, pace }: Plan): PotsCaution[] {
  if (usable === null || pace.paceM2PerH !== null) return []
  return [pace.flowGPerMin === null ? 'pace-unknown' : 'flow-only']
}
