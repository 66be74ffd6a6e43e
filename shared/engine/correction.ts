import type { Dec } from './decimal'
import { ZERO, largest, roundTo, sum } from './decimal'
import type { Mix, MixComponent } from './mix'
import { baseOf, weightPartsOf } from './mix'
import type { Scale } from './scale'
import { readingUncertaintyG } from './scale'
import { followBaseG, highTargetOf } from './targets'
import type { Band, Verdict } from './verdict'
import { bandOf, judge } from './verdict'

/** What is in the cup of one component, judged. */
export interface Judged {
  component: MixComponent
  /** As planned while the base is not in; after it, as the base poured asks. */
  targetG: Dec
  pouredG: Dec | null
  verdict: Verdict | null
  band: Band
  uncertaintyG: Dec
  /** Its deviation was accepted: it asks for nothing any more, and nothing else grows to meet it. */
  kept: boolean
}

/** Why something is offered. */
export type CorrectionCause = 'reactive-too-much' | 'thinner-too-much' | 'short-at-end'

/** Keeping what was poured, offered before a correction when only something that does not react is too much. */
interface KeepOffer {
  index: number
  /** Parts as poured, in the mix's own basis. */
  partsAsPoured: Dec
  /** Null where the sheet gives no maximum. */
  withinSheet: boolean | null
}

export interface Correction {
  cause: CorrectionCause
  /** The component that asked for it. */
  index: number
  keep: KeepOffer | null
  /** New targets on the division, in the mix's order. */
  newTargetsG: Dec[]
  /** Grams to add; nothing is ever taken out. */
  addG: Dec[]
  /** False where the scale is too coarse: followed to the gram, a component would still not be in tolerance. */
  settles: boolean
}

/** Judges what is in the cup: the base against its target, everything else against the base as poured. */
export function judgeAll(
  mix: Mix, plannedG: readonly Dec[], pouredG: readonly (Dec | null)[], scale: Scale, kept: readonly number[] = [],
): Judged[] {
  const base = baseOf(mix)
  const basePouredG = pouredG[base.index] ?? null
  return mix.components.map((component, index) => {
    const followsG = basePouredG === null || component === base ? null : followBaseG(component, basePouredG, base)
    const targetG = followsG === null ? plannedG[index] ?? ZERO : roundTo(followsG, scale.divisionG)
    const band = bandOf(targetG, component.tolerancePct, highTargetOf(mix, component, followsG ?? targetG, scale.divisionG))
    const poured = pouredG[index] ?? null
    const uncertaintyG = readingUncertaintyG(scale, poured ?? targetG)
    return {
      component,
      targetG,
      pouredG: poured,
      verdict: poured === null ? null : judge(poured, band, uncertaintyG),
      band,
      uncertaintyG,
      kept: kept.includes(index),
    }
  })
}

/**
 * What to offer for the cup as it is, or null where nothing is wrong.
 * 1. Too much of a hardener or any reactive component: the whole batch grows, s* = max of what is poured ÷ its parts.
 * 2. Too much of anything else that follows the base: keep it first, else the same correction.
 * 3. Everything poured and something short of the base: a top-up of that alone.
 * Too much base asks for nothing: the others follow it.
 */
export function correctionFor(mix: Mix, judged: readonly Judged[], scale: Scale): Correction | null {
  const followers = judged.filter(({ component, kept }) => component.index !== mix.baseIndex && !kept)
  const tooMuch = followers.filter(({ verdict }) => verdict === 'too-much')
  const reactive = tooMuch.find(({ component }) => startsReaction(component))
  const cause = reactive ?? tooMuch[0]
  if (cause !== undefined) {
    return grow(mix, judged, cause, reactive === undefined ? 'thinner-too-much' : 'reactive-too-much', scale)
  }
  if (judged.some(({ pouredG }) => pouredG === null)) return null
  const short = followers.find(({ verdict }) => verdict === 'short')
  return short === undefined ? null : topUp(mix, judged, short.component.index, scale)
}

/** A hardener always counts, whatever the record says of it: its excess stays in the film. */
function startsReaction({ reactive, role }: MixComponent): boolean {
  return reactive || role === 'hardener' || role === 'peroxide' || role === 'accelerator'
}

function grow(mix: Mix, judged: readonly Judged[], cause: Judged, kind: CorrectionCause, scale: Scale): Correction {
  const scales = judged.flatMap(({ pouredG, component, kept }) =>
    (pouredG === null || kept ? [] : [{ pouredG, component }]))
  // The largest quotient as a fraction, so that the culprit's own new target is exactly what was poured.
  const lead = scales.reduce((most, next) =>
    next.pouredG.times(most.component.weightParts).gt(most.pouredG.times(next.component.weightParts)) ? next : most)
  const newTargetsG = mix.components.map(({ weightParts }) =>
    roundTo(lead.pouredG.times(weightParts).div(lead.component.weightParts), scale.divisionG))
  return finish(mix, judged, {
    cause: kind,
    index: cause.component.index,
    keep: kind === 'thinner-too-much' ? keepOf(mix, cause, judged) : null,
    newTargetsG,
    addG: newTargetsG.map((target, index) => remaining(target, judged[index]?.pouredG ?? null)),
  }, scale)
}

function topUp(mix: Mix, judged: readonly Judged[], index: number, scale: Scale): Correction {
  return finish(mix, judged, {
    cause: 'short-at-end',
    index,
    keep: null,
    newTargetsG: judged.map(({ targetG }) => targetG),
    addG: judged.map(({ verdict, component, targetG, pouredG, kept }) =>
      verdict === 'short' && component.index !== mix.baseIndex && !kept ? remaining(targetG, pouredG) : ZERO),
  }, scale)
}

/** Pours the offer in thought, to the gram, and judges once more. */
function finish(
  mix: Mix, judged: readonly Judged[], offer: Omit<Correction, 'settles'>, scale: Scale,
): Correction {
  const afterG = judged.map(({ pouredG }, index) => (pouredG ?? ZERO).plus(offer.addG[index] ?? ZERO))
  const after = judgeAll(mix, offer.newTargetsG, afterG, scale)
  const settles = after.every(({ verdict, component }, index) =>
    verdict === 'in-tolerance' || judged[index]?.kept === true
    || (offer.cause === 'short-at-end' && component.index === mix.baseIndex))
  return { ...offer, settles }
}

function keepOf(mix: Mix, cause: Judged, judged: readonly Judged[]): KeepOffer | null {
  const base = baseOf(mix)
  const baseG = judged[base.index]?.pouredG ?? null
  if (baseG === null || cause.pouredG === null) return null
  const { component } = cause
  const weightParts = cause.pouredG.times(base.weightParts).div(baseG)
  const partsAsPoured = weightParts.times(component.parts).div(component.weightParts)
  return {
    index: component.index,
    partsAsPoured,
    withinSheet: component.sheetMaxParts === null
      ? null
      : weightParts.lte(weightPartsOf(mix, component, component.sheetMaxParts)),
  }
}

/** max(0, target − poured). */
export function remaining(targetG: Dec, pouredG: Dec | null): Dec {
  return largest([ZERO, targetG.minus(pouredG ?? ZERO)])
}

/** Grams in the cup when everything still to be added is in. */
export function totalAfter(judged: readonly Judged[], addG: readonly Dec[]): Dec {
  return sum(judged.map(({ pouredG }, index) => (pouredG ?? ZERO).plus(addG[index] ?? ZERO)))
}
