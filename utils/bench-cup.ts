import type { BenchPart } from '#shared/utils/bench-tools'
import { patternOf } from './batch-words'
import type { ComponentRole } from './roles'

/** Layers of the drawn cup, bottom to top in the order of the mix. Grams are decimal strings. */
export function cupLayers(
  parts: readonly BenchPart[], targetsG: readonly string[], pouredG: readonly (string | null)[],
): { role: ComponentRole, label: string, code: string, targetG: string, pouredG: string }[] {
  return parts.map((part, place) => ({
    role: patternOf(part.role),
    label: part.material.name,
    code: part.material.code,
    targetG: targetsG[place] ?? '0',
    pouredG: pouredG[place] ?? '0',
  }))
}
