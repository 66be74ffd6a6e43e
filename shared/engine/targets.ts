import type { Dec } from './decimal'
import { HUNDRED, ONE, ZERO, ceilTo, largest, roundTo, sum } from './decimal'
import type { Mix, MixComponent } from './mix'
import { baseOf, gramsOf, weightPartsOf } from './mix'
import type { Scale, Weighing } from './scale'
import { canWeigh, readingUncertaintyG } from './scale'
import type { Fitness } from './verdict'
import { fitnessOf } from './verdict'

/** What is meant of one component in one pot. */
export interface Target {
  component: MixComponent
  exactG: Dec
  /** On the scale's division. */
  targetG: Dec
  /** Sum of the targets so far, in pouring order. */
  runningTotalG: Dec
  /** Error of the ratio against the base that rounding alone makes, in per cent; null while the base's target is 0. */
  ratioErrorPct: Dec | null
  uncertaintyG: Dec
  fitness: Fitness
}

/** Targets of one pot: exact grams to the nearest division, half up. Their sum is the printed total. */
export function targetsOf(mix: Mix, totalG: Dec, scale: Scale, weighing: Weighing = 'tared'): Target[] {
  const base = baseOf(mix)
  const baseTargetG = roundTo(gramsOf(mix, base, totalG), scale.divisionG)
  let runningTotalG = ZERO
  return mix.components.map((component) => {
    const exactG = gramsOf(mix, component, totalG)
    const targetG = roundTo(exactG, scale.divisionG)
    runningTotalG = runningTotalG.plus(targetG)
    const uncertaintyG = readingUncertaintyG(scale, weighing === 'running' ? runningTotalG : targetG, weighing)
    return {
      component,
      exactG,
      targetG,
      runningTotalG,
      ratioErrorPct: deviationPct(targetG, component, baseTargetG, base),
      uncertaintyG,
      fitness: fitnessOf(targetG, component.tolerancePct, uncertaintyG),
    }
  })
}

export function targetTotalOf(targets: readonly Target[]): Dec {
  return sum(targets.map(({ targetG }) => targetG))
}

/** (q ÷ q_base) ÷ (w ÷ w_base) − 1, in per cent; null while there is no base. */
export function deviationPct(grams: Dec, component: MixComponent, baseG: Dec, base: MixComponent): Dec | null {
  if (baseG.lte(0)) return null
  return grams.times(base.weightParts).div(baseG.times(component.weightParts)).minus(ONE).times(HUNDRED)
}

/** What a component must be once `baseG` of the base is in: q_base · w ÷ w_base, not yet rounded. */
export function followBaseG(component: MixComponent, baseG: Dec, base: MixComponent): Dec {
  return baseG.times(component.weightParts).div(base.weightParts)
}

/** Target at the upper end of a range, or null without one. */
export function highTargetOf(mix: Mix, component: MixComponent, exactG: Dec, divisionG: Dec): Dec | null {
  if (component.partsMax === null) return null
  const high = weightPartsOf(mix, component, component.partsMax)
  return roundTo(exactG.times(high).div(component.weightParts), divisionG)
}

/**
 * The smallest total, on the division, at which no component is too small for the scale: each target must be at least
 * u ÷ tolerance. Where the permissible error grows with the load it is looked up again until it no longer moves.
 * Null where the scale would have to weigh more than it may.
 */
export function smallestTotalG(mix: Mix, scale: Scale, weighing: Weighing = 'tared'): Dec | null {
  let total = scale.divisionG
  while (canWeigh(scale, total)) {
    const needed = smallestFor(mix, targetsOf(mix, total, scale, weighing), scale.divisionG)
    if (needed.lte(total)) return total
    total = needed
  }
  return null
}

function smallestFor(mix: Mix, targets: readonly Target[], divisionG: Dec): Dec {
  return largest(targets.map(({ component, uncertaintyG }) => {
    const leastTargetG = ceilTo(uncertaintyG.times(HUNDRED).div(component.tolerancePct), divisionG)
    const leastExactG = leastTargetG.minus(divisionG.div(2))
    return ceilTo(leastExactG.times(mix.totalWeightParts).div(component.weightParts), divisionG)
  }))
}
