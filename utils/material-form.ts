import type { Material } from '#shared/schemas/materials'
import { blanksToNull } from '~/utils/form-conflict'

/** What the fields of a material's form hold: text as typed, '' where nothing is given. */
export type MaterialValues = ReturnType<typeof materialValues>

const text = (value: string | null | undefined): string => value ?? ''

/** The fields of a material, or of a new one. */
export function materialValues(material?: Material) {
  return {
    code: text(material?.code),
    name: text(material?.name),
    role: text(material?.role),
    chemistry: text(material?.chemistry),
    supplier: text(material?.supplier),
    makerCode: text(material?.makerCode),
    pricePerKg: text(material?.pricePerKg),
    reorderPointG: text(material?.reorderPointG),
    shelfLifeDays: material?.shelfLifeDays == null ? '' : String(material.shelfLifeDays),
    densityGPerMl: text(material?.densityGPerMl),
    solidsPct: text(material?.solidsPct),
    volumeSolidsPct: text(material?.volumeSolidsPct),
    reactsPct: text(material?.reactsPct),
    vocGPerL: text(material?.vocGPerL),
    vocPct: text(material?.vocPct),
    waterPct: text(material?.waterPct),
    exemptPct: text(material?.exemptPct),
    flashPointC: text(material?.flashPointC),
    signalWord: text(material?.signalWord),
    containsIsocyanates: material?.containsIsocyanates ?? false,
    hazardCodes: material?.hazards.map(hazard => hazard.code) ?? [],
    protectionMixing: text(material?.protectionMixing),
    protectionSpraying: text(material?.protectionSpraying),
    version: material?.version,
  }
}

/** The fields as the API takes them. */
export function materialBody(values: MaterialValues): unknown {
  const { version, ...fields } = values
  const days = fields.shelfLifeDays.trim()
  return {
    ...blanksToNull(fields) as object,
    shelfLifeDays: days === '' ? null : /^\d{1,6}$/.test(days) ? parseInt(days, 10) : days,
    // A new one has no version, and the schema takes no key that it does not know.
    ...(version === undefined ? {} : { version }),
  }
}

/** Names of the fields as the form shows them. */
export const MATERIAL_LABELS: Readonly<Record<string, string>> = {
  code: 'Code', name: 'Name', role: 'Role', chemistry: 'Chemistry', supplier: 'Supplier', makerCode: 'Maker\'s code', pricePerKg: 'Price per kg',
  reorderPointG: 'Order again at', shelfLifeDays: 'Keeps, unopened', densityGPerMl: 'Density', solidsPct: 'Solids by weight',
  volumeSolidsPct: 'Solids by volume', reactsPct: 'Reacts into the film', vocGPerL: 'Solvent, g/L', vocPct: 'Solvent by weight',
  waterPct: 'Water by weight', exemptPct: 'Exempt solvent by weight', flashPointC: 'Flash point', signalWord: 'Signal word',
  containsIsocyanates: 'Contains isocyanates', hazardCodes: 'Statements', protectionMixing: 'What to wear when mixing', protectionSpraying: 'What to wear when spraying',
}
