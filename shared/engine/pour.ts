import type { Correction, CorrectionCause, Judged } from './correction'
import { correctionFor, judgeAll, remaining, totalAfter } from './correction'
import type { Dec } from './decimal'
import { HUNDRED, ONE, ZERO, print, readNonNegative, readPositive } from './decimal'
import { EngineError } from './error'
import type { Mix, MixInput } from './mix'
import { baseOf, componentAt, readMix } from './mix'
import type { ScaleInput } from './scale'
import { canWeigh, readScale } from './scale'
import { deviationPct, targetTotalOf, targetsOf } from './targets'
import type { Verdict } from './verdict'
import { fitnessOf } from './verdict'

/** What is meant of a pot and what is in it. Decimals are plain strings. */
export interface PourInput {
  mix: MixInput
  scaleDivisionG: string
  /** Maximum permissible error of the scale, where its record has one. */
  scaleMpeG?: string | undefined
  /** The batch's total. Hand in its exact total where it is at hand: targets then fall on the same grams as there. */
  targetTotalG: string
  /** Sum poured of each component so far; one that is not listed is not poured yet. */
  poured: readonly { index: number, pouredG: string }[]
  cupCapacityG?: string | undefined
  /** Indexes of components whose deviation was accepted with a reason. */
  kept?: readonly number[] | undefined
}

export interface PourComponent {
  /** Follows the base as poured; until the base is in, as planned. */
  targetG: string
  pouredG: string | null
  /** Base: against its target. Others: of the ratio, against the base as poured. Null while there is nothing to compare. */
  deviationPct: string | null
  verdict: Verdict | null
  /** After the correction; the target where none is needed. */
  newTargetG: string
  /** Still to be added, by the correction where one is needed. */
  addG: string
  /** Ends of the allowed band. A reading inside it may still be too near its end for this scale. */
  lowG: string
  highG: string
  uncertaintyG: string
  tooSmallForScale: boolean
}

/** The answer of `POST /api/calculations/pour`. */
export interface PourAnswer {
  components: PourComponent[]
  correctionNeeded: boolean
  /** In the cup when everything to be added is in. */
  newTotalG: string
  /** New total less the planned one; negative where less is made. */
  extraG: string
  /** Whether the new total fits cup and scale. */
  fits: boolean
  cause: CorrectionCause | null
  /** Offered before a correction, for what does not react. */
  keep: { index: number, partsAsPoured: string, withinSheet: boolean | null } | null
  /** The correction, followed to the gram, could not be judged in tolerance on this scale. */
  tooCoarseForScale: boolean
  complete: boolean
}

/** Beyond the division: only for callers that hold the scale's record. */
export interface PourOptions {
  scale?: Omit<ScaleInput, 'divisionG' | 'mpeG'>
}

/**
 * Judges a pot while it is poured, and what to add where something went over.
 * @throws EngineError `component-unknown`, `poured-twice`, and for numbers that cannot be true
 */
export function calculatePour(input: PourInput, { scale: record }: PourOptions = {}): PourAnswer {
  const mix = readMix(input.mix)
  const scale = readScale({ ...record, divisionG: input.scaleDivisionG, mpeG: input.scaleMpeG })
  const planned = targetsOf(mix, readPositive(input.targetTotalG, 'targetTotalG'), scale)
  const cupCapacityG = input.cupCapacityG === undefined ? null : readPositive(input.cupCapacityG, 'cupCapacityG')
  const judged = judgeAll(mix, planned.map(({ targetG }) => targetG), readPoured(input, mix), scale, input.kept)
  const correction = correctionFor(mix, judged, scale)
  const addG = correction?.addG ?? judged.map(toAdd)
  const newTotalG = totalAfter(judged, addG)
  return {
    components: judged.map((one, index) => printJudged(mix, judged, one, correction?.newTargetsG[index] ?? one.targetG, addG[index])),
    correctionNeeded: correction !== null,
    newTotalG: print(newTotalG),
    extraG: print(newTotalG.minus(targetTotalOf(planned))),
    fits: (cupCapacityG === null || newTotalG.lte(cupCapacityG)) && canWeigh(scale, newTotalG),
    cause: correction?.cause ?? null,
    keep: printKeep(correction),
    tooCoarseForScale: correction !== null && !correction.settles,
    complete: judged.every(({ pouredG }) => pouredG !== null),
  }
}

function readPoured(input: PourInput, mix: Mix): (Dec | null)[] {
  const grams: (Dec | null)[] = mix.components.map(() => null)
  input.poured.forEach(({ index, pouredG }, position) => {
    componentAt(mix, index, `poured.${position}.index`)
    if (grams[index] !== null) {
      throw new EngineError('poured-twice', `poured.${position}.index`, 'Give each component once, as the sum of its pours')
    }
    grams[index] = readNonNegative(pouredG, `poured.${position}.pouredG`)
  })
  return grams
}

/** Without a correction only what is short, undecided or not poured asks for more. */
function toAdd({ verdict, targetG, pouredG }: Judged): Dec {
  return verdict === 'in-tolerance' || verdict === 'too-much' ? ZERO : remaining(targetG, pouredG)
}

function printJudged(
  mix: Mix, judged: readonly Judged[], one: Judged, newTargetG: Dec, addG: Dec | undefined,
): PourComponent {
  const deviation = deviationOf(mix, judged, one)
  return {
    targetG: print(one.targetG),
    pouredG: one.pouredG === null ? null : print(one.pouredG),
    deviationPct: deviation === null ? null : print(deviation),
    verdict: one.verdict,
    newTargetG: print(newTargetG),
    addG: addG === undefined ? '0' : print(addG),
    lowG: print(one.band.lowG),
    highG: print(one.band.highG),
    uncertaintyG: print(one.uncertaintyG),
    tooSmallForScale: fitnessOf(one.targetG, one.component.tolerancePct, one.uncertaintyG) === 'too-small',
  }
}

function deviationOf(mix: Mix, judged: readonly Judged[], one: Judged): Dec | null {
  if (one.pouredG === null) return null
  const base = baseOf(mix)
  if (one.component === base) {
    return one.targetG.lte(0) ? null : one.pouredG.div(one.targetG).minus(ONE).times(HUNDRED)
  }
  const baseG = judged[base.index]?.pouredG ?? null
  return baseG === null ? null : deviationPct(one.pouredG, one.component, baseG, base)
}

function printKeep(correction: Correction | null): PourAnswer['keep'] {
  if (correction === null || correction.keep === null) return null
  const { index, partsAsPoured, withinSheet } = correction.keep
  return { index, partsAsPoured: print(partsAsPoured), withinSheet }
}
