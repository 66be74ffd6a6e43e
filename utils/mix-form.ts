import type { Mix, MixRevision } from '#shared/schemas/mixes'
import type { Role } from '#shared/engine/mix'
import { blanksToNull } from '~/utils/form-conflict'

/** A component's row. `key` keeps its place on the screen when rows move. */
export interface MixRow {
  key: string
  materialId: string
  role: Role
  parts: string
  partsMax: string
  tolerancePct: string
  reactive: boolean
}

/** What the fields of a mix hold: text as typed, '' where nothing is given. */
export interface MixValues extends Record<string, unknown> {
  code: string
  name: string
  basis: 'weight' | 'volume'
  components: MixRow[]
  /** Only the form's own: which of the pot life's fields count. */
  potLifeIs: 'none' | 'single' | 'table'
  potLifeMin: string
  potLifeReferenceC: string
  potLifeTable: { c: string, min: string }[]
  halvesPerC: string
  potLifeSource: string
  lateFromPct: string
  inductionMin: string
  viscosity: { cup: string, secondsMin: string, secondsMax: string, atC: string }
  densityGPerMl: string
  volumeSolidsPct: string
  leftoverSharePct: string
  notes: string
  version: number | undefined
}

const ROLES = ['base', 'hardener', 'thinner'] as const

/** A new row at a place: first the base, then the hardener, then thinners, as the trade writes ratios. */
export function blankRow(place: number, key: string): MixRow {
  const role = ROLES[Math.min(place, 2)] ?? 'thinner'
  return { key, materialId: '', role, parts: place === 0 ? '100' : '', partsMax: '', tolerancePct: '', reactive: role === 'hardener' }
}

const text = (value: string | null | undefined): string => value ?? ''

function rowsOf(revision: MixRevision): MixRow[] {
  return revision.components.map(({ index, materialId, role, parts, partsMax, tolerancePct, toleranceGiven, reactive }) =>
    ({ key: String(index), materialId, role, parts, partsMax: text(partsMax), tolerancePct: toleranceGiven ? text(tolerancePct) : '', reactive }))
}

/** The fields of a mix's revision in force, or of a new mix. */
export function mixValues(mix?: Mix): MixValues {
  const revision = mix?.current
  return {
    code: mix?.code ?? '',
    name: mix?.name ?? '',
    basis: revision?.basis ?? 'weight',
    components: revision ? rowsOf(revision) : [blankRow(0, '0'), blankRow(1, '1')],
    potLifeIs: revision ? revision.potLifeIs ?? 'none' : 'single',
    potLifeMin: text(revision?.potLifeMin),
    potLifeReferenceC: revision ? text(revision.potLifeReferenceC) : '20',
    potLifeTable: revision?.potLifeTable?.map(row => ({ ...row })) ?? [{ c: '', min: '' }],
    halvesPerC: text(revision?.halvesPerC),
    potLifeSource: text(revision?.potLifeSource),
    lateFromPct: revision?.lateFromPct ?? '75',
    inductionMin: revision?.inductionMin ?? '0',
    viscosity: {
      cup: text(revision?.viscosity?.cup), secondsMin: text(revision?.viscosity?.secondsMin), secondsMax: text(revision?.viscosity?.secondsMax), atC: text(revision?.viscosity?.atC),
    },
    densityGPerMl: revision?.densityIs === 'given' ? text(revision.densityGPerMl) : '',
    volumeSolidsPct: text(revision?.volumeSolidsPct),
    leftoverSharePct: text(revision?.leftoverSharePct),
    notes: text(revision?.notes),
    version: mix?.version,
  }
}

/** The fields as the API takes them; what the choice of pot life leaves out is not sent. */
export function mixBody(values: MixValues): Record<string, unknown> {
  const { code, name, version, potLifeIs, components, viscosity, ...fields } = values
  return {
    ...blanksToNull(fields) as Record<string, unknown>,
    ...(version === undefined ? { code, name } : { version }),
    components: components.map(({ key: _key, ...row }) => blanksToNull(row)),
    viscosity: viscosity.cup === '' ? null : blanksToNull(viscosity),
    potLifeMin: potLifeIs === 'single' ? values.potLifeMin || null : null,
    potLifeReferenceC: potLifeIs === 'single' ? values.potLifeReferenceC || null : null,
    potLifeTable: potLifeIs === 'table' ? values.potLifeTable : null,
    halvesPerC: potLifeIs === 'none' ? null : values.halvesPerC || null,
    potLifeSource: potLifeIs === 'none' ? null : values.potLifeSource || null,
  }
}

export const MIX_LABELS: Readonly<Record<string, string>> = {
  code: 'Code', name: 'Name', basis: 'Parts by', components: 'Components', potLifeIs: 'Pot life', potLifeMin: 'Pot life', potLifeReferenceC: 'Pot life at',
  potLifeTable: 'Pot life by temperature', halvesPerC: 'Halves with every', potLifeSource: 'Pot life by', lateFromPct: 'Late from',
  inductionMin: 'Stand after stirring', viscosity: 'Viscosity to reach', densityGPerMl: 'Density, mixed', volumeSolidsPct: 'Solids by volume, mixed',
  leftoverSharePct: 'Leftover in a fresh pot', notes: 'Notes',
}
