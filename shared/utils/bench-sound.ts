import type { Verdict } from '../engine/verdict'

/** What the bench lets be heard: one tick where the weight enters the tolerance, two low strokes where it is too much. */
export type BenchSound = 'tick' | 'low' | null

interface Heard {
  verdict: Verdict | null
  steady: boolean
  /** Typed digit by digit: only a figure that stands is heard. */
  typed: boolean
  /** Too much of the base is nothing to stop for: the others follow it. */
  baseLeads: boolean
}

/** The sound of one reading after another of the same weighing; nothing while the verdict stays what it was. */
export function soundOf(before: Verdict | null, { verdict, steady, typed, baseLeads }: Heard): BenchSound {
  if (verdict === before || (typed && !steady)) return null
  if (verdict === 'in-tolerance') return 'tick'
  return verdict === 'too-much' && !baseLeads ? 'low' : null
}

/** The verdict that the next reading is compared with: a figure that is still being typed has none yet. */
export const heardOf = (before: Verdict | null, { verdict, steady, typed }: Heard): Verdict | null => (typed && !steady ? before : verdict)
