import type { BenchRefusal } from './bench-refusal'
import { inCupG, type BenchRun } from './bench-run'

/**
 * Whether a batch that is left has to stay on this tablet: grams that were poured never go with it. What another tablet
 * has taken over stands there, but for what this one could not send any more.
 */
export function staysHere(run: BenchRun, refusal: Pick<BenchRefusal, 'code'> | null, isUnsent: boolean): boolean {
  return inCupG(run) !== '0' && (refusal?.code !== 'taken-over' || isUnsent)
}
