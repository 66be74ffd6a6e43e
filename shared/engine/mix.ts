import type { Dec } from './decimal'
import { D, HUNDRED, ZERO, readDecimal, readPositive, sum } from './decimal'
import { EngineError } from './error'

export type Basis = 'weight' | 'volume'
export type Role = 'base' | 'hardener' | 'thinner' | 'additive' | 'accelerator' | 'peroxide'

/** One component as handed in; every decimal is a plain string. */
export interface MixComponentInput {
  name: string
  /** Parts by the mix's basis, more than 0. The low end where `partsMax` is given. */
  parts: string
  /** Upper end of a range, for a thinner set by viscosity. */
  partsMax?: string | undefined
  /** The most the data sheet allows; `partsMax` where not given. */
  sheetMaxParts?: string | undefined
  /** g/mL at mixing temperature. Needed from every component of a mix by volume. */
  densityGPerMl?: string | undefined
  role?: Role | undefined
  /** Allowed deviation in per cent of the target. */
  tolerancePct?: string | undefined
  /** Starts the pot life when together with another component. */
  reactive?: boolean | undefined
}

export interface MixInput {
  basis: Basis
  components: readonly MixComponentInput[]
}

export interface MixComponent {
  index: number
  name: string
  role: Role
  parts: Dec
  partsMax: Dec | null
  sheetMaxParts: Dec | null
  densityGPerMl: Dec | null
  tolerancePct: Dec
  reactive: boolean
  /** Grams that go with the other components' `weightParts`. */
  weightParts: Dec
}

export interface Mix {
  basis: Basis
  components: readonly MixComponent[]
  /** Index of the component that the others follow. */
  baseIndex: number
  totalWeightParts: Dec
  /** Of the mixed material, by volume additivity; null unless every density is known. */
  densityGPerMl: Dec | null
}

const MOST_COMPONENTS = 8
const MOST_PARTS = '1000000'
const MOST_DENSITY = '30'

/** Default tolerances in per cent. Common practice, no source. A peroxide's is its sheet's own. */
const DEFAULT_TOLERANCE_PCT: Record<Exclude<Role, 'peroxide'>, Dec> = {
  base: new D(2),
  hardener: new D(3),
  accelerator: new D(3),
  thinner: new D(5),
  additive: new D(5),
}

/**
 * Checks a mix and works out its weight parts: wᵢ = pᵢ by weight, pᵢ·ρᵢ by volume.
 * Roles not named: the first component is the base, the second the hardener, later ones thinner.
 * @throws EngineError `components-count`, `density-missing`, `base-missing`, `tolerance-missing`, `range-reversed`
 */
export function readMix(input: MixInput, field = 'mix'): Mix {
  if (input.components.length < 1 || input.components.length > MOST_COMPONENTS) {
    throw new EngineError('components-count', `${field}.components`, 'A mix has 1 to 8 components')
  }
  const components = input.components.map((component, index) =>
    readComponent(component, index, input.basis, `${field}.components.${index}`))
  const baseIndex = components.findIndex(({ role }) => role === 'base')
  if (baseIndex < 0) {
    throw new EngineError('base-missing', `${field}.components`, 'One component must be the base')
  }
  return {
    basis: input.basis,
    components,
    baseIndex,
    totalWeightParts: sum(components.map(({ weightParts }) => weightParts)),
    densityGPerMl: mixDensity(components),
  }
}

/** The component that the others follow. */
export function baseOf(mix: Mix): MixComponent {
  return componentAt(mix, mix.baseIndex, 'mix.components')
}

/** @throws EngineError `component-unknown` where the mix has no such index */
export function componentAt(mix: Mix, index: number, field: string): MixComponent {
  const component = mix.components[index]
  if (component === undefined) {
    throw new EngineError('component-unknown', field, 'The mix has no such component')
  }
  return component
}

/** wᵢ ÷ Σw, from 0 to 1. */
export function shareOf(mix: Mix, component: MixComponent): Dec {
  return component.weightParts.div(mix.totalWeightParts)
}

/** `total · wᵢ ÷ Σw`, divided last so that nothing is rounded on the way. */
export function gramsOf(mix: Mix, component: MixComponent, totalG: Dec): Dec {
  return totalG.times(component.weightParts).div(mix.totalWeightParts)
}

/** Millilitres of a component, or null where its density is not known. */
export function volumeOf(component: MixComponent, grams: Dec): Dec | null {
  return component.densityGPerMl === null ? null : grams.div(component.densityGPerMl)
}

/**
 * Parts by the other basis, scaled so that the base keeps its figure. Needs every density.
 * @throws EngineError `density-missing`
 */
export function convertBasis(mix: Mix, basis: Basis): Dec[] {
  const inBasis = mix.components.map((component) => {
    if (basis === 'weight') return component.weightParts
    return component.weightParts.div(needDensity(component.densityGPerMl, `mix.components.${component.index}`))
  })
  const base = baseOf(mix)
  const basePart = inBasis[base.index] ?? ZERO
  return inBasis.map(part => part.times(base.parts).div(basePart))
}

/** `parts` of a component as weight parts: itself by weight, times the density by volume. */
export function weightPartsOf(mix: Mix, component: MixComponent, parts: Dec): Dec {
  return mix.basis === 'weight' ? parts : parts.times(component.weightParts).div(component.parts)
}

/** True where pouring everything together starts a pot life. */
export function hasPotLife(mix: Mix): boolean {
  return mix.components.length > 1 && mix.components.some(({ reactive }) => reactive)
}

function readComponent(input: MixComponentInput, index: number, basis: Basis, field: string): MixComponent {
  const role = input.role ?? roleAt(index)
  const parts = readPositive(input.parts, `${field}.parts`, MOST_PARTS)
  const densityGPerMl = input.densityGPerMl === undefined
    ? null
    : readPositive(input.densityGPerMl, `${field}.densityGPerMl`, MOST_DENSITY)
  const partsMax = readUpper(input.partsMax, parts, `${field}.partsMax`)
  const weightParts = basis === 'weight' ? parts : parts.times(needDensity(densityGPerMl, field))
  return {
    index,
    name: input.name,
    role,
    parts,
    partsMax,
    sheetMaxParts: readUpper(input.sheetMaxParts, partsMax ?? parts, `${field}.sheetMaxParts`) ?? partsMax,
    densityGPerMl,
    tolerancePct: readTolerance(input.tolerancePct, role, `${field}.tolerancePct`),
    reactive: input.reactive ?? (role === 'hardener' || role === 'peroxide'),
    weightParts,
  }
}

function roleAt(index: number): Role {
  if (index === 0) return 'base'
  return index === 1 ? 'hardener' : 'thinner'
}

function readUpper(text: string | undefined, least: Dec, field: string): Dec | null {
  if (text === undefined) return null
  const upper = readPositive(text, field, MOST_PARTS)
  if (upper.lt(least)) {
    throw new EngineError('range-reversed', field, 'The upper end must not be below the parts')
  }
  return upper
}

function readTolerance(text: string | undefined, role: Role, field: string): Dec {
  if (text !== undefined) return readDecimal(text, field, { above: ZERO, max: HUNDRED })
  if (role === 'peroxide') {
    throw new EngineError('tolerance-missing', field, 'Give the peroxide tolerance of its data sheet')
  }
  return DEFAULT_TOLERANCE_PCT[role]
}

function needDensity(density: Dec | null, field: string): Dec {
  if (density === null) {
    throw new EngineError('density-missing', `${field}.densityGPerMl`, 'A ratio by volume needs every density')
  }
  return density
}

function mixDensity(components: readonly MixComponent[]): Dec | null {
  const volumes: Dec[] = []
  for (const component of components) {
    const volume = volumeOf(component, component.weightParts)
    if (volume === null) return null
    volumes.push(volume)
  }
  return sum(components.map(({ weightParts }) => weightParts)).div(sum(volumes))
}
