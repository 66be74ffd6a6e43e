import type { AmountInput } from './amount'
import { readAmount } from './amount'
import type { Dec } from './decimal'
import { HUNDRED, print } from './decimal'
import type { Mix, MixInput } from './mix'
import { readMix, shareOf, volumeOf } from './mix'
import type { ScaleInput, Weighing } from './scale'
import { readScale } from './scale'
import type { Target } from './targets'
import { smallestTotalG, targetTotalOf, targetsOf } from './targets'
import type { Fitness } from './verdict'
import type { WorkingLine } from './working'
import { line } from './working'

/** What one pot is to be. Decimals are plain strings. */
export interface BatchInput extends AmountInput {
  mix: MixInput
  scaleDivisionG: string
  /** Maximum permissible error of the scale, where its record has one. */
  scaleMpeG?: string | undefined
}

/** Beyond the division: only for callers that hold the scale's record. */
export interface BatchOptions {
  scale?: Omit<ScaleInput, 'divisionG' | 'mpeG'>
  weighing?: Weighing
}

export interface BatchComponent {
  name: string
  parts: string
  /** By weight. */
  sharePct: string
  exactG: string
  targetG: string
  runningTotalG: string
  /** What rounding to the division does to the ratio against the base; null while the base's target is 0. */
  ratioErrorPct: string | null
  /** Of the target; null where the density is not known. */
  volumeMl: string | null
}

/** The answer of `POST /api/calculations/batch`. */
export interface BatchAnswer {
  /** Null where no coat weight is known. */
  depositedG: string | null
  sprayedG: string
  exactTotalG: string
  targetTotalG: string
  tooSmallForScale: boolean
  /** Smallest total at which every component can be judged on this scale; null where it may not weigh so much. */
  smallestTotalG: string | null
  components: BatchComponent[]
  working: WorkingLine[]
}

/** A {@link BatchAnswer} with what only the bench and the server need. */
export interface BatchPlan extends BatchAnswer {
  /** The area it covers; null where no coat weight is known. */
  areaM2: string | null
  /** Of the mix; null unless every density is known. */
  densityGPerMl: string | null
  volumeMl: string | null
  components: (BatchComponent & { uncertaintyG: string, fitness: Fitness })[]
}

/**
 * Area, total grams or a remainder → gram targets for one pot, with the working of every figure.
 * Rounds once: targets to the scale's division, everything else to 12 decimals.
 * @throws EngineError for any input that cannot be true, with the path of the field
 */
export function planBatch(input: BatchInput, { scale: record, weighing }: BatchOptions = {}): BatchPlan {
  const mix = readMix(input.mix)
  const scale = readScale({ ...record, divisionG: input.scaleDivisionG, mpeG: input.scaleMpeG })
  const amount = readAmount(input, mix, scale.divisionG)
  const targets = targetsOf(mix, amount.totalG, scale, weighing)
  const targetTotal = targetTotalOf(targets)
  const smallest = smallestTotalG(mix, scale, weighing)
  return {
    depositedG: amount.depositedG === null ? null : print(amount.depositedG),
    sprayedG: print(amount.sprayedG),
    exactTotalG: print(amount.totalG),
    targetTotalG: print(targetTotal),
    tooSmallForScale: targets.some(({ fitness }) => fitness === 'too-small'),
    smallestTotalG: smallest === null ? null : print(smallest),
    areaM2: amount.areaM2 === null ? null : print(amount.areaM2),
    densityGPerMl: mix.densityGPerMl === null ? null : print(mix.densityGPerMl),
    volumeMl: mix.densityGPerMl === null ? null : print(targetTotal.div(mix.densityGPerMl)),
    components: targets.map(target => printTarget(mix, target)),
    working: [...amount.working, ...mixWorking(mix), ...targetWorking(mix, amount.totalG, targets, scale.divisionG)],
  }
}

/** Exactly the answer of `POST /api/calculations/batch`. */
export function calculateBatch(input: BatchInput): BatchAnswer {
  const plan = planBatch(input)
  return {
    depositedG: plan.depositedG,
    sprayedG: plan.sprayedG,
    exactTotalG: plan.exactTotalG,
    targetTotalG: plan.targetTotalG,
    tooSmallForScale: plan.tooSmallForScale,
    smallestTotalG: plan.smallestTotalG,
    components: plan.components.map(withoutFitness),
    working: plan.working,
  }
}

/** Targets as they leave the engine. */
export function printTargets(mix: Mix, targets: readonly Target[]): BatchComponent[] {
  return targets.map(target => withoutFitness(printTarget(mix, target)))
}

function withoutFitness({ uncertaintyG: _u, fitness: _f, ...component }: BatchPlan['components'][number]): BatchComponent {
  return component
}

function printTarget(mix: Mix, target: Target): BatchPlan['components'][number] {
  const { component, exactG, targetG, runningTotalG, ratioErrorPct, uncertaintyG, fitness } = target
  const volume = volumeOf(component, targetG)
  return {
    name: component.name,
    parts: print(component.parts),
    sharePct: print(shareOf(mix, component).times(HUNDRED)),
    exactG: print(exactG),
    targetG: print(targetG),
    runningTotalG: print(runningTotalG),
    ratioErrorPct: ratioErrorPct === null ? null : print(ratioErrorPct),
    volumeMl: volume === null ? null : print(volume),
    uncertaintyG: print(uncertaintyG),
    fitness,
  }
}

function mixWorking(mix: Mix): WorkingLine[] {
  const byVolume = mix.basis === 'volume'
    ? mix.components.map(({ name, parts, densityGPerMl, weightParts }) =>
        line(`${name}, parts by weight`, `${print(parts)} × ${print(densityGPerMl ?? parts)} g/mL`, weightParts, 'parts'))
    : []
  if (mix.densityGPerMl === null) return byVolume
  const volumes = mix.components.map(({ weightParts, densityGPerMl }) =>
    `${print(weightParts)} ÷ ${print(densityGPerMl ?? weightParts)}`)
  return [
    ...byVolume,
    line('density of the mix, volumes taken to add up',
      `${print(mix.totalWeightParts)} ÷ (${volumes.join(' + ')})`, mix.densityGPerMl, 'g/mL'),
  ]
}

function targetWorking(mix: Mix, totalG: Dec, targets: readonly Target[], divisionG: Dec): WorkingLine[] {
  return [
    ...targets.flatMap(({ component, exactG, targetG }) => [
      line(`${component.name}, exact`,
        `${print(totalG)} g × ${print(component.weightParts)} ÷ ${print(mix.totalWeightParts)}`, exactG, 'g'),
      line(`${component.name}, target`, `${print(exactG)} g to the nearest ${print(divisionG)} g`, targetG, 'g'),
    ]),
    line('total of the targets', targets.map(({ targetG }) => print(targetG)).join(' + '), targetTotalOf(targets), 'g'),
  ]
}
