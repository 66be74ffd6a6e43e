import type { Batch, BatchListItem, ReviewCode } from '#shared/schemas/batches'
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

/** Why a foreman should look at a batch: a few words for the bench, a sentence for the log. */
export const reviewWords: Record<ReviewCode, { short: string, long: string }> = {
  'out-of-tolerance': { short: 'out of tolerance', long: 'A component is out of tolerance and nobody approved it.' },
  'not-complete': { short: 'not complete', long: 'A component of the mix was not poured.' },
  'expired-lot': { short: 'lot out of date', long: 'A lot was out of date.' },
  'blocked-lot': { short: 'blocked lot', long: 'A lot was blocked.' },
  'late-entry': { short: 'entered late', long: 'It was entered more than seven days after it was mixed.' },
  'not-mixed-in-order': { short: 'not in the safe order', long: 'The components were not poured in the safe order.' },
  'booth-clash': { short: 'booth not clean', long: 'Its chemistry clashes with what was sprayed in this booth since it was last recorded clean.' },
  'clock-ahead': { short: 'clock ahead', long: 'The tablet\'s clock was ahead; the moment was set back to the server\'s.' },
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
