/** Where two chemistries meet: one after the other in a booth, in one waste bin, in neighbouring schedule steps. */
export type Meeting = 'booth' | 'bin' | 'adjacent-steps'

/** One rule of the table that is handed in; chemistries are the shop's own keys. */
export interface ChemistryRule {
  scope: Meeting
  first: string
  second: string
  /** The rule holds in this order only; otherwise both ways round. */
  ordered?: boolean
  /** `blocked`: in a booth until booth, duct and filters are recorded clean; `caution`: shown, may be gone past. */
  verdict: 'blocked' | 'caution'
  advice: string
}

/**
 * The strictest rule that two chemistries break, or null. In a booth a recorded cleaning of booth, duct and filters
 * between the two lifts it.
 */
export function clashOf(
  rules: readonly ChemistryRule[], meeting: Meeting, first: string, second: string, cleanedBetween = false,
): ChemistryRule | null {
  if (meeting === 'booth' && cleanedBetween) return null
  const broken = rules.filter(rule => rule.scope === meeting
    && ((rule.first === first && rule.second === second)
      || (rule.ordered !== true && rule.first === second && rule.second === first)))
  return broken.find(({ verdict }) => verdict === 'blocked') ?? broken[0] ?? null
}
