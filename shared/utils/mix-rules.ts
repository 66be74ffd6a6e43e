import { EngineError } from '../engine/error'
import { hasPotLife, readMix, type Mix, type MixInput, type Role } from '../engine/mix'
import { calculatePotLife } from '../engine/pot-life'
import { D } from '../engine/decimal'

/** What the rules look at of a material. */
export interface RuledMaterial {
  id: string
  code: string
  role: Role | 'ready-to-use'
  densityGPerMl: string | null
  archived: boolean
}

interface RuledComponent {
  materialId: string
  role: Role
  parts: string
  partsMax: string | null
  tolerancePct: string | null
  reactive: boolean
}

/** A revision that is being written. */
export interface RuledRevision {
  basis: 'weight' | 'volume'
  components: readonly RuledComponent[]
  potLifeMin: string | null
  potLifeReferenceC: string | null
  potLifeTable: readonly { c: string, min: string }[] | null
  halvesPerC: string | null
  lateFromPct: string
  inductionMin: string
  viscosity: { secondsMin: string | null, secondsMax: string | null } | null
}

export interface Fault {
  path: string
  message: string
}

type Materials = ReadonlyMap<string, RuledMaterial>

/** The components as the engine takes them; a material that is not known has no density. */
export function mixInputOf({ basis, components }: Pick<RuledRevision, 'basis' | 'components'>, materials: Materials): MixInput {
  return {
    basis,
    components: components.map(({ materialId, role, parts, partsMax, tolerancePct, reactive }) => ({
      name: materials.get(materialId)?.code ?? '?',
      parts,
      partsMax: partsMax ?? undefined,
      densityGPerMl: materials.get(materialId)?.densityGPerMl ?? undefined,
      role,
      tolerancePct: tolerancePct ?? undefined,
      reactive,
    })),
  }
}

/**
 * What is wrong with a revision beyond the shape of its fields, each beside the field that mends it; empty where it can
 * be mixed.
 */
export function mixFaults(revision: RuledRevision, materials: Materials): Fault[] {
  const faults = [...componentFaults(revision.components, materials), ...viscosityFaults(revision.viscosity)]
  if (faults.length > 0) return faults
  try {
    const mix = readMix(mixInputOf(revision, materials))
    return potLifeFaults(revision, mix)
  }
  catch (error) {
    if (error instanceof EngineError) return [beside(error)]
    throw error
  }
}

/** The engine names its own input; a form shows a missing density beside the material that lacks it. */
export function beside({ code, field, message }: EngineError): Fault {
  const path = field.replace(/^mix\./, '')
  if (code === 'density-missing') {
    return { path: path.replace(/densityGPerMl$/, 'materialId'), message: 'A ratio by volume needs its density: enter it at the material.' }
  }
  return { path, message: `${message}.` }
}

const roleOf = (material: RuledMaterial): Role => (material.role === 'ready-to-use' ? 'base' : material.role)

/** What is wrong with the materials of a mix. */
export function componentFaults(components: readonly RuledComponent[], materials: Materials): Fault[] {
  return components.flatMap(({ materialId, role }, place) => {
    const material = materials.get(materialId)
    if (!material) return [{ path: `components.${place}.materialId`, message: 'There is no such material.' }]
    if (material.archived) return [{ path: `components.${place}.materialId`, message: 'This material is archived: take another one.' }]
    if (components.findIndex(other => other.materialId === materialId) < place) {
      return [{ path: `components.${place}.materialId`, message: 'This material is in the mix already.' }]
    }
    // The safe pouring order hangs on these two being called what they are.
    const isDangerous = [role, roleOf(material)].some(one => one === 'accelerator' || one === 'peroxide')
    return isDangerous && role !== roleOf(material)
      ? [{ path: `components.${place}.role`, message: `${material.code} is entered as ${roleOf(material)}: the safe pouring order needs that role.` }]
      : []
  })
}

function viscosityFaults(viscosity: RuledRevision['viscosity']): Fault[] {
  const { secondsMin: least = null, secondsMax: most = null } = viscosity ?? {}
  return least !== null && most !== null && new D(most).lt(least)
    ? [{ path: 'viscosity.secondsMax', message: 'The upper end must not be below the lower one.' }]
    : []
}

function potLifeFaults(revision: RuledRevision, mix: Mix): Fault[] {
  const { potLifeMin, potLifeReferenceC, potLifeTable } = revision
  const isGiven = potLifeMin !== null || potLifeTable !== null
  if (hasPotLife(mix) && !isGiven) {
    return [{ path: 'potLifeMin', message: 'A component starts a pot life: give the sheet\'s, or its table.' }]
  }
  if (!isGiven) return []
  if (!hasPotLife(mix)) return [{ path: 'components', message: 'A pot life is given, but no component starts it: tick the one that does.' }]
  if (potLifeMin !== null && potLifeTable !== null) return [{ path: 'potLifeTable', message: 'Give one value or a table, not both.' }]
  if (potLifeTable === null && potLifeReferenceC === null) return [{ path: 'potLifeReferenceC', message: 'Give the temperature that the sheet names.' }]
  return lifeFaults(revision)
}

/** Lets the engine read the pot life as the bench will. */
function lifeFaults({ potLifeMin, potLifeReferenceC, potLifeTable, halvesPerC, lateFromPct, inductionMin }: RuledRevision): Fault[] {
  const fields: Record<string, string> = { referenceMin: 'potLifeMin', referenceC: 'potLifeReferenceC' }
  try {
    const { usableMin } = calculatePotLife({
      referenceMin: potLifeMin ?? undefined, referenceC: potLifeReferenceC ?? undefined, table: potLifeTable ?? undefined,
      halvesPerC: halvesPerC ?? undefined, lateFromPct, inductionMin, temperatureC: potLifeReferenceC ?? potLifeTable?.[0]?.c ?? '20',
    })
    return new D(usableMin).lte(0) ? [{ path: 'inductionMin', message: 'It would be late before it may be sprayed.' }] : []
  }
  catch (error) {
    if (!(error instanceof EngineError)) throw error
    const path = fields[error.field] ?? error.field.replace(/^table/, 'potLifeTable').replace(/^temperatureC$/, 'potLifeReferenceC')
    return [{ path, message: `${error.message}.` }]
  }
}
