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

/** Why a foreman should look at a batch: a few words for the bench, a sentence for the log, and what to look at. */
export const reviewWords: Record<ReviewCode, { short: string, long: string, look: string }> = {
  'out-of-tolerance': { short: 'out of tolerance', long: 'A component is out of tolerance and nobody approved it.', look: 'Compare poured and target, and ask what the sprayer saw. Press a test panel of the day with a thumbnail: a short hardener stays soft.' },
  'not-complete': { short: 'not complete', long: 'A component of the mix was not poured.', look: 'Ask whether it went in unweighed or was left out. Without its hardener a coat stays soft: hold its pieces until it is clear.' },
  'expired-lot': { short: 'lot out of date', long: 'A lot was out of date.', look: 'Look at the tin and its use-by date. The maker\'s sheet says whether it may still be used; peroxide past its date never.' },
  'blocked-lot': { short: 'blocked lot', long: 'A lot was blocked.', look: 'Read why the lot was blocked, and whether that touches the pieces it went on.' },
  'late-entry': { short: 'entered late', long: 'It was entered more than seven days after it was mixed.', look: 'Check grams, lots and times against the note they were kept on.' },
  'not-mixed-in-order': { short: 'not in the safe order', long: 'The components were not poured in the safe order.', look: 'Accelerator and peroxide must never meet undiluted. Ask how it was poured, and show the order on the data sheet again.' },
  'booth-clash': { short: 'booth not clean', long: 'Its chemistry clashes with what was sprayed in this booth since it was last recorded clean.', look: 'Dust and overspray of such a pair can heat up and burn by itself: look at booth, duct, filters and waste cans now, and have them cleaned and recorded. The data sheets and local rules decide.' },
  'clock-ahead': { short: 'clock ahead', long: 'The tablet\'s clock was ahead; the moment was set back to the server\'s.', look: 'Check the start of the pot\'s life against who mixed it, and set the tablet\'s clock.' },
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

/** The component furthest off the ratio, by the page's own figures. */
export function worstRoleOf({ components, worstDeviationPct }: Pick<Batch, 'components' | 'worstDeviationPct'>): BatchListItem['worstRole'] {
  return components.find(({ deviationPct, role }) => role !== 'base' && deviationPct !== null && deviationPct === worstDeviationPct)?.role ?? null
}

const causes: Record<string, string> = {
  'reactive-too-much': 'too much of what reacts', 'thinner-too-much': 'too much thinner', 'short-at-end': 'too little of a component at the end', 'cup-lifted': 'the cup weighed otherwise after it was lifted',
}

/** Why a correction was offered, in a few words. */
export const causeWords = (cause: string): string => causes[cause] ?? cause.replaceAll('-', ' ')
