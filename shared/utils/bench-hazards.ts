import type { BenchPart } from './bench-tools'

/** What calls for a word before it is opened. */
type HazardKind = 'isocyanates' | 'peroxide' | 'nitrocellulose'

export interface BenchHazard {
  kind: HazardKind
  /** The material that brings it. */
  part: BenchPart
  /** What to put on for mixing, as the safety data sheet says it; one entry a tap. */
  mixing: string[]
  /** All that the sheet says of it. */
  mixingWords: string
  /** What to wear for spraying, as the sheet says it; null where it is silent. */
  spraying: string | null
}

const SILENT_SHEET = ['Mask as on the safety data sheet', 'Gloves as on the safety data sheet', 'Eye protection as on the safety data sheet']

/** The hazard of one component, or null. */
export function hazardOf(part: BenchPart): BenchHazard | null {
  const kind = kindOf(part)
  if (kind === null) return null
  const words = part.material.protectionMixing
  return {
    kind,
    part,
    mixing: words === null ? SILENT_SHEET : sentenceParts(words),
    mixingWords: (words ?? 'as the safety data sheet says').replace(/\.$/, ''),
    spraying: part.material.protectionSpraying,
  }
}

function kindOf({ material, role }: BenchPart): HazardKind | null {
  if (material.containsIsocyanates) return 'isocyanates'
  if (role === 'peroxide' || material.chemistry.includes('peroxide')) return 'peroxide'
  return /nitro/.test(material.chemistry) ? 'nitrocellulose' : null
}

/** `A2-P3 mask, nitrile gloves, eye protection.` → three things to put on, in the sheet's own words; what points to the sheet is none. */
function sentenceParts(words: string): string[] {
  return words.split(/[,;]/).map(part => part.trim().replace(/\.$/, '')).filter(part => part !== '' && !/data sheet/i.test(part))
}

/** The hazards of a mix, one of a kind, in its order. */
export function hazardsOf(parts: readonly BenchPart[]): BenchHazard[] {
  return parts.flatMap(part => hazardOf(part) ?? []).filter((hazard, place, all) => all.findIndex(({ kind }) => kind === hazard.kind) === place)
}

/** What the strip says of a hazard. */
export const HAZARD_WORDS: Record<HazardKind, string> = {
  isocyanates: 'contains isocyanates',
  peroxide: 'is a peroxide: never together with accelerator, never in a metal can',
  nitrocellulose: 'contains nitrocellulose: dust and rags wet, in a closed metal can',
}
