import { powerOfTen, unitsOf } from '#shared/utils/decimal-text'
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

/** Brims in grams that a drawn cup may have. */
const BRIMS = ['100', '250', '500', '1000', '1500', '2000', '3000', '5000', '10000', '25000', '60000']
/** The cup holds so many hundredths of what was poured. */
const ROOM = 118n

/** A brim that looks right for so many grams, with some room: the record keeps grams, not which cup stood there. */
export function brimFor(pouredG: string): string {
  const { units, scale } = unitsOf(pouredG)
  return BRIMS.find(brim => units * ROOM <= BigInt(brim) * 100n * powerOfTen(scale)) ?? pouredG
}
