import { D, print } from '../engine/decimal'
import type { Dec } from '../engine/decimal'
import { inCupG, NO_READING, takeReading, weighingG } from './bench-run'
import type { BenchMoment, BenchRun, BenchWeight } from './bench-run'
import type { ScaleReading, ScaleSourceKind } from './bench-scale'
import type { BenchTools } from './bench-tools'
import { toIso } from './instant'

/** Smaller falls are a scale that settles, even in an empty cup; no mixing cup weighs less. */
const LEAST_LIFT_G = '5'
/** Up to so many grams a cup that is put back is the same cup. */
const SAME_CUP_G = '1'

/** A fall by more than this is the cup leaving the scale: half of what is in it. */
function liftG(run: BenchRun): Dec {
  return D.max(LEAST_LIFT_G, new D(inCupG(run)).div(2))
}

const grams = (text: string): Dec => new D(text === '' ? '0' : text)

/**
 * A reading of a scale that sees the cup itself. The cup may be lifted at any time: that pauses the pour at the last
 * gram and never means that the component is done. Put back it goes on; with more than a gram of difference it asks.
 * A run that the reading does not change comes back as it is.
 */
export function takeCupReading(run: BenchRun, reading: ScaleReading, source: ScaleSourceKind, moment: BenchMoment, tools: BenchTools): BenchRun {
  if (run.lift !== null) return whileLifted(run, reading, source, moment, tools)
  const from = fallFrom(run, reading, moment)
  if (from !== null && grams(from.grams).minus(grams(reading.grams)).gt(liftG({ ...run, reading: { ...run.reading, grams: from.grams } }))) {
    return {
      ...run,
      reading: { ...run.reading, grams: from.grams, at: from.at, steady: false, fellFrom: null },
      lift: { ...from, backG: null },
    }
  }
  const next = takeReading(run, reading, source, moment, tools)
  return next === run || reading.steady ? next : { ...next, reading: { ...next.reading, fellFrom: from } }
}

/** Where the fall that this reading belongs to began; null while the weight grows or stands. */
function fallFrom({ reading: before }: BenchRun, { grams: now }: ScaleReading, moment: BenchMoment): BenchWeight | null {
  if (grams(now).gt(grams(before.grams))) return null
  if (before.fellFrom !== null) return before.fellFrom
  return grams(now).eq(grams(before.grams)) ? null : { grams: before.grams === '' ? '0' : before.grams, at: before.at ?? toIso(moment.at) }
}

function whileLifted(run: BenchRun, reading: ScaleReading, source: ScaleSourceKind, moment: BenchMoment, tools: BenchTools): BenchRun {
  const { lift } = run
  if (lift === null || !reading.steady) return run
  const change = grams(reading.grams).minus(lift.grams)
  if (change.lt(liftG(run).neg())) return lift.backG === null ? run : { ...run, lift: { ...lift, backG: null } }
  if (change.abs().lte(SAME_CUP_G)) return takeReading({ ...run, lift: null }, reading, source, moment, tools)
  return lift.backG === reading.grams ? run : { ...run, lift: { ...lift, backG: reading.grams } }
}

/** Why a cup can come back with other grams than it left with. */
export const LIFT_REASONS = ['Some was poured out', 'Some was poured in meanwhile', 'Something else stands on the scale now'] as const

/** The cup is back with other grams and somebody said why: the word of the scale that saw it counts from here, the reason is kept. */
export function explainLift(run: BenchRun, reason: string, moment: BenchMoment, tools: BenchTools): BenchRun {
  const { lift } = run
  if (lift === null || lift.backG === null) return run
  const back = takeReading({ ...run, lift: null }, { grams: lift.backG, steady: true, at: moment.deviceAt }, run.reading.source, moment, tools)
  return {
    ...back,
    corrections: [...run.corrections, {
      at: toIso(moment.at),
      cause: 'cup-lifted',
      accepted: false,
      newTargets: [],
      reason: `Cup lifted at ${lift.grams} g, back at ${lift.backG} g: ${reason}`,
      approvalId: null,
    }],
  }
}

/** Grams that came or went while the cup was off the scale; null while it is off or was not. */
export function liftDifferenceG({ lift }: BenchRun): string | null {
  return lift === null || lift.backG === null ? null : print(new D(lift.backG).minus(lift.grams))
}

/** The scale no longer answers: what it last said stands, but is no longer steady. */
export function scaleLost(run: BenchRun): BenchRun {
  return run.reading.steady ? { ...run, reading: { ...run.reading, steady: false } } : run
}

/** The rest of this batch is typed: the last reading stands until somebody types. */
export function typeByHand(run: BenchRun): BenchRun {
  return { ...run, byHand: true, lift: null, reading: { ...run.reading, steady: false, source: 'typed', fellFrom: null } }
}

/** Counts from zero again; what is in stays in. */
export function tared(run: BenchRun): BenchRun {
  return { ...run, taredG: weighingG(run), reading: { ...NO_READING, source: run.reading.source, at: run.reading.at } }
}

/** Up to so many grams next to nothing stands on the scale, and a tare wipes nothing worth asking about. */
const ASK_ABOVE_G = '5'

/** True when a tare would wipe a reading that somebody may still need. */
export const asksBeforeTare = (run: BenchRun): boolean => new D(run.reading.grams || '0').gt(ASK_ABOVE_G)
