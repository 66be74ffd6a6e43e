import type { BenchSnapshot, BenchStep } from '../schemas/bench'
import { offeredLots } from './bench-lots'
import { clashOfSetup } from './bench-booth'

/** Why a coat of today's list is not to be mixed right now, beyond what its windows say; in words. */
export interface BenchHindrance {
  kind: 'no-mix' | 'clash' | 'no-stock'
  word: string
  reason: string
  /** Nothing at this bench helps: the row cannot be chosen. */
  isFinal: boolean
}

/**
 * What stands in the way of a coat that could be sprayed by its windows: no mix, the booth's last chemistry, no lot.
 *
 * @param homeBoothId the bench's own booth, where the step names none
 * @param today the shop's calendar day
 */
export function hindranceOf(step: BenchStep, snapshot: BenchSnapshot, homeBoothId: string | null, today: string): BenchHindrance | null {
  const mix = snapshot.mixes.find(({ id }) => id === step.mixId)
  if (mix === undefined) {
    const reason = step.mixId === null ? 'The schedule names no mix for it: ask the foreman.' : 'Its mix was taken out of use: ask the foreman.'
    return { kind: 'no-mix', word: 'No mix', reason, isFinal: true }
  }
  if (step.ready !== 'ready' && step.ready !== 'mixing') return null
  const clash = clashOfSetup({ mixId: mix.id, boothId: step.boothId ?? homeBoothId ?? '' }, snapshot)
  if (clash?.verdict === 'blocked') return { kind: 'clash', word: 'Clean booth', reason: clash.words, isFinal: false }
  const short = mix.components.find(({ materialId }) => offeredLots(snapshot, materialId, today).length === 0)
  if (short === undefined) return null
  const code = snapshot.materials.find(({ id }) => id === short.materialId)?.code ?? 'a component'
  return { kind: 'no-stock', word: 'No stock', reason: `No lot of ${code} may be poured: out of date, blocked or used up.`, isFinal: false }
}

/** Today's list with what can be coated now in front; within a kind its order never changes. */
export function byReadiness(steps: readonly BenchStep[]): BenchStep[] {
  const rank: Record<BenchStep['ready'], number> = { ready: 0, mixing: 1, wait: 2, sand: 3, held: 4, done: 5 }
  return [...steps].sort((a, b) => rank[a.ready] - rank[b.ready])
}
