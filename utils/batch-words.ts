import type { Batch, BatchListItem } from '#shared/schemas/batches'
import type { StateName } from '~/utils/states'
import { percent } from '~/utils/format'
import type { ComponentRole } from '~/utils/roles'

type PotState = BatchListItem['state']

/** How the state of a pot is shown; none where nothing runs and nothing is wrong. */
export const potStateName: Record<PotState, StateName | null> = {
  'fresh': 'pot-fresh',
  'closing': 'pot-closing',
  'life-up': 'pot-up',
  'emptied': 'pot-emptied',
  'stopped': null,
  'no-pot-life': null,
}

/** The words of the state filter. */
export const potStateWords: Record<PotState, string> = {
  'fresh': 'Fresh',
  'closing': 'Closing',
  'life-up': 'Pot life up',
  'emptied': 'Emptied',
  'stopped': 'Stopped',
  'no-pot-life': 'No pot life',
}

/** How a component's weight is shown. */
export const verdictName = {
  'short': 'weight-short',
  'in-tolerance': 'weight-in-tolerance',
  'too-much': 'weight-too-much',
  'cannot-tell': 'weight-cannot-tell',
} as const satisfies Record<string, StateName>

/** Words of a sealed component: nobody keeps pouring into it. */
export const sealedVerdictWords = {
  'short': 'Short',
  'in-tolerance': 'In tolerance',
  'too-much': 'Too much',
  'cannot-tell': 'Cannot tell on this scale',
} as const

/** Why a foreman should look at a batch, in words. */
export const reviewWords: Record<string, string> = {
  'out-of-tolerance': 'A component is out of tolerance and nobody approved it.',
  'cannot-tell': 'The scale could not tell whether a component is in tolerance.',
  'not-complete': 'A component of the mix was not poured.',
  'expired-lot': 'A lot was out of date.',
  'blocked-lot': 'A lot was blocked.',
  'late-entry': 'It was entered more than seven days after it was mixed.',
  'not-mixed-in-order': 'The components were not poured in the safe order.',
  'clock-ahead': 'The tablet\'s clock was ahead; the moment was set back to the server\'s.',
  'over-fill': 'It is more than the cup may hold.',
  'stock-short': 'More was poured than the lot should have held: count it.',
}

/** A role's pattern in drawings: what is neither base, hardener nor thinner takes the fourth. */
export function patternOf(role: string): ComponentRole {
  return role === 'base' || role === 'hardener' || role === 'thinner' ? role : 'fourth'
}

/** What was off, in the words of the log, or `within`. */
export function deviationWords(batch: Pick<BatchListItem, 'outOfTolerance' | 'worstRole' | 'worstDeviationPct' | 'corrected' | 'outcome'>): string {
  if (batch.outcome === 'stopped') return 'stopped'
  if (batch.outOfTolerance && batch.worstRole && batch.worstDeviationPct) {
    return `${batch.worstRole} ${percent(batch.worstDeviationPct, { decimals: 1, signed: true })}`
  }
  return batch.corrected ? 'corrected' : 'within'
}

/** What the batch is for, in one line. */
export function purposeOf(batch: Pick<Batch, 'jobCode' | 'jobTitle' | 'stepTitle' | 'purpose'>): string {
  if (!batch.jobCode) return batch.purpose ? `Loose mix, ${batch.purpose}` : 'Loose mix'
  return [`${batch.jobCode} ${batch.jobTitle ?? ''}`.trim(), batch.stepTitle].filter(Boolean).join(', ')
}
