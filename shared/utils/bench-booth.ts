import { clashOf } from '../engine/chemistry-clash'
import type { ChemistryRule } from '../engine/chemistry-clash'
import type { BenchSnapshot } from '../schemas/bench'
import type { BoothPast } from '../schemas/booth-cleanings'
import type { BenchSetup } from './bench-setup'

/** Two chemistries that may not meet in a booth: the one that is to be sprayed and the one that lies there. */
export interface BoothClash {
  chemistry: string
  past: BoothPast
  verdict: ChemistryRule['verdict']
  advice: string
}

/**
 * The strictest clash between a mix and what a booth, its duct and filters hold since they were last recorded clean.
 *
 * @param chemistries of all components of the mix
 * @returns null where nothing clashes
 */
export function boothClash(chemistries: readonly string[], past: readonly BoothPast[], rules: readonly ChemistryRule[]): BoothClash | null {
  const found = past.flatMap(one => [...new Set(chemistries)].flatMap((chemistry) => {
    const rule = clashOf(rules, 'booth', one.chemistry, chemistry)
    return rule === null ? [] : [{ chemistry, past: one, verdict: rule.verdict, advice: rule.advice }]
  }))
  return found.find(({ verdict }) => verdict === 'blocked') ?? found[0] ?? null
}

/** A chemistry as it is said: `acid-curing` stands as it is, `uv` in capitals. */
export const chemistryWords = (chemistry: string): string => (chemistry === 'uv' ? 'UV' : chemistry)

/** Why a mix is not started for a booth for which another one is being mixed, in plain words. */
export function begunWords({ chemistry, past, advice }: BoothClash, boothName: string): string {
  return `${past.mixName} (${chemistryWords(past.chemistry)}) is being mixed for ${boothName}; this mix is ${chemistryWords(chemistry)}. Take another booth, or wait until that pot is stopped or sprayed and emptied. ${advice}`
}

/** Why a mix is not started for a booth, in plain words. */
export function clashWords({ chemistry, past, advice }: BoothClash, boothName: string): string {
  return `${boothName} was last used for ${chemistryWords(past.chemistry)} (${past.mixName}); this mix is ${chemistryWords(chemistry)}. ${advice}`
}

/** What the chosen mix and booth do to each other, in words; null where nothing clashes. */
export function clashOfSetup(setup: Pick<BenchSetup, 'mixId' | 'boothId'>, snapshot: BenchSnapshot): (BoothClash & { words: string }) | null {
  const mix = snapshot.mixes.find(({ id }) => id === setup.mixId)
  const booth = snapshot.booths.find(({ id }) => id === setup.boothId)
  if (mix === undefined || booth === undefined) return null
  const ids = new Set(mix.components.map(({ materialId }) => materialId))
  const chemistries = snapshot.materials.filter(({ id }) => ids.has(id)).map(({ chemistry }) => chemistry)
  const clash = boothClash(chemistries, booth.past, snapshot.chemistryRules)
  return clash === null ? null : { ...clash, words: clashWords(clash, booth.name) }
}
