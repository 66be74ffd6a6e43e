import { calculatePotLife, warmerC } from '../engine/pot-life'
import type { PotLifeAnswer } from '../engine/pot-life'
import { D, print } from '../engine/decimal'
import { readMix } from '../engine/mix'
import type { MixInput } from '../engine/mix'
import { potLimitG, readScale } from '../engine/scale'
import type { BenchBooth, BenchComponent, BenchCup, BenchGun, BenchMaterial, BenchMix, BenchScale, BenchSnapshot } from '../schemas/bench'

export type GunShape = 'flat' | 'frames' | 'sticks'

/** A component of the mix together with its material. */
export interface BenchPart extends BenchComponent {
  material: BenchMaterial
}

/** All that one pot is made with. */
export interface BenchTools {
  mix: BenchMix
  parts: BenchPart[]
  /** The mix as the arithmetic takes it. */
  input: MixInput
  scale: BenchScale
  cup: BenchCup
  booth: BenchBooth | null
  gun: BenchGun | null
  /** Of the mixed material, g/mL; null where a density is missing. */
  densityGPerMl: string | null
  /** Grams at the brim and at the fill line; null without a density. */
  brimG: string | null
  fillLineG: string | null
  /** The most that cup and scale take together; null where nothing bounds it. */
  limitG: string | null
}

export interface ToolChoice {
  mixId: string
  /** The revision that a pot was begun by; the one in use where not given. */
  revisionId?: string
  scaleId: string
  cupId: string
  gunId: string | null
  boothId: string | null
}

/**
 * Finds what was chosen and works out how much the cup holds of this mix.
 * @returns null while something is not chosen or no longer there
 * @throws EngineError for a mix that cannot be reckoned
 */
export function benchTools(choice: ToolChoice, snapshot: BenchSnapshot): BenchTools | null {
  const mix = mixOf(choice, snapshot)
  const scale = snapshot.scales.find(({ id }) => id === choice.scaleId)
  const cup = snapshot.cups.find(({ id }) => id === choice.cupId)
  if (!mix || !scale || !cup) return null
  const parts = partsOf(mix, snapshot)
  if (parts === null) return null
  const input = mixInput(mix, parts)
  const densityGPerMl = mix.densityGPerMl ?? worked(input)
  const limit = potLimitG(
    densityGPerMl === null ? {} : { cupCapacityMl: cup.fillLineMl },
    readScale({ divisionG: scale.divisionG, capacityG: scale.capacityG }),
    densityGPerMl === null ? null : new D(densityGPerMl),
  )
  return {
    mix,
    parts,
    input,
    scale,
    cup,
    booth: snapshot.booths.find(({ id }) => id === choice.boothId) ?? null,
    gun: snapshot.guns.find(({ id }) => id === choice.gunId) ?? null,
    densityGPerMl,
    brimG: inGrams(cup.capacityMl, densityGPerMl),
    fillLineG: inGrams(cup.fillLineMl, densityGPerMl),
    limitG: limit === null ? null : print(limit),
  }
}

/** A pot keeps the revision that it was begun by, whatever was written since. */
function mixOf({ mixId, revisionId }: ToolChoice, { mixes, heldMixes = [] }: BenchSnapshot): BenchMix | undefined {
  if (revisionId === undefined) return mixes.find(({ id }) => id === mixId)
  return [...mixes, ...heldMixes].find(mix => mix.revisionId === revisionId)
}

function partsOf(mix: BenchMix, snapshot: BenchSnapshot): BenchPart[] | null {
  const parts: BenchPart[] = []
  for (const component of mix.components) {
    const material = snapshot.materials.find(({ id }) => id === component.materialId)
    if (!material) return null
    parts.push({ ...component, material })
  }
  return parts
}

/** The mix as the arithmetic takes it; components keep the order of the revision. */
function mixInput(mix: Pick<BenchMix, 'basis'>, parts: readonly BenchPart[]): MixInput {
  return {
    basis: mix.basis,
    components: parts.map(part => ({
      name: part.material.name,
      parts: part.parts,
      partsMax: part.partsMax ?? undefined,
      densityGPerMl: part.material.densityGPerMl ?? undefined,
      role: part.role,
      tolerancePct: part.tolerancePct ?? undefined,
      reactive: part.reactive,
    })),
  }
}

function worked(input: MixInput): string | null {
  const { densityGPerMl } = readMix(input)
  return densityGPerMl === null ? null : print(densityGPerMl)
}

function inGrams(ml: string, densityGPerMl: string | null): string | null {
  return densityGPerMl === null ? null : print(new D(ml).times(densityGPerMl))
}

/** What was measured of the pot: °C of the air and of the material in the cup, null where not measured. */
interface Warmth {
  airC: string | null
  materialC: string | null
}

/**
 * Pot life of the mix as warm as it is known to be. Without any temperature the sheet's own counts, or the hottest row
 * of its table: the careful side. Null without a pot life.
 */
export function benchPotLife(mix: BenchMix, { airC, materialC }: Warmth): PotLifeAnswer | null {
  if (mix.potLifeMin === null && mix.potLifeTable === null) return null
  return calculatePotLife({
    referenceMin: mix.potLifeMin ?? undefined,
    referenceC: mix.potLifeReferenceC ?? undefined,
    table: mix.potLifeTable ?? undefined,
    halvesPerC: mix.halvesPerC ?? undefined,
    temperatureC: warmerC(materialC, airC) ?? sheetC(mix),
    lateFromPct: mix.lateFromPct,
    inductionMin: mix.inductionMin,
  })
}

function sheetC({ potLifeReferenceC, potLifeTable }: BenchMix): string {
  if (potLifeTable === null || potLifeTable.length === 0) return potLifeReferenceC ?? '20'
  return potLifeTable.map(({ c }) => c).reduce((hottest, c) => (new D(c).gt(hottest) ? c : hottest))
}
