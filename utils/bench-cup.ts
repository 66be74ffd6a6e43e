import type { BenchPart } from '#shared/utils/bench-tools'
import type { ComponentRole } from './roles'

/** The pattern of a component: base, hardener and thinner have their own, everything else the fourth. */
export function patternOf(role: BenchPart['role']): ComponentRole {
  return role === 'base' || role === 'hardener' || role === 'thinner' ? role : 'fourth'
}

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
