import { plainFields, pourFieldOf, type PlainField } from '#shared/schemas/amendments'
import type { Batch } from '#shared/schemas/batches'
import { clockSeconds, day, grams, percent } from '~/utils/format'
import { cupName } from '~/utils/words'

/** How a value is typed or chosen. */
type AmendInput = 'grams' | 'decimal' | 'instant' | 'lot' | 'gun' | 'booth' | 'person' | 'cup' | 'text'

const plain: Record<PlainField, { label: string; input: AmendInput; unit?: string }> = {
  reactiveAt: { label: 'Start of pot life', input: 'instant' },
  firstSprayAt: { label: 'First spray', input: 'instant' },
  lastSprayAt: { label: 'Last spray', input: 'instant' },
  closedAt: { label: 'Emptied time', input: 'instant' },
  leftoverG: { label: 'Left over', input: 'grams', unit: 'g' },
  gunId: { label: 'Gun', input: 'gun' },
  boothId: { label: 'Booth', input: 'booth' },
  mixedByUserId: { label: 'Mixed by', input: 'person' },
  purpose: { label: 'Purpose', input: 'text' },
  airC: { label: 'Air', input: 'decimal', unit: '°C' },
  rhPct: { label: 'Humidity', input: 'decimal', unit: '% RH' },
  surfaceC: { label: 'Surface', input: 'decimal', unit: '°C' },
  materialC: { label: 'Material temperature', input: 'decimal', unit: '°C' },
  viscosityCup: { label: 'Viscosity cup', input: 'cup' },
  viscositySeconds: { label: 'Viscosity', input: 'decimal', unit: 's' },
  note: { label: 'Note', input: 'text' },
}

/** One value that can be amended, as it stands now. */
export interface AmendField {
  field: string
  label: string
  input: AmendInput
  unit?: string
  /** As the API has it. */
  value: string | null
  /** Of the material, where a lot is chosen. */
  materialId?: string
}

/** Everything of a batch that can be put right, with what it says now. What has not happened yet is left out. */
export function amendFields(batch: Batch): AmendField[] {
  const pours = batch.components.flatMap((component) => component.pours.flatMap((pour): AmendField[] => {
    const place = component.pours.length > 1 ? `, weighing ${pour.position + 1}` : ''
    const path = `pours.${component.index}.${pour.position}`
    return [
      { field: `${path}.grams`, label: `${component.materialCode}${place}: grams`, input: 'grams', unit: 'g', value: pour.grams },
      { field: `${path}.lotId`, label: `${component.materialCode}${place}: lot`, input: 'lot', value: pour.lotId, materialId: component.materialId },
    ]
  }))
  const values = plainValues(batch)
  const hidden = (field: PlainField) =>
    (['firstSprayAt', 'lastSprayAt', 'closedAt', 'reactiveAt'].includes(field) && values[field] === null)
    || (field === 'leftoverG' && batch.closedAt === null)
    || (batch.outcome === 'stopped' && ['leftoverG', 'closedAt', 'reactiveAt'].includes(field))
  const others = plainFields.filter((field) => !hidden(field)).map((field): AmendField => ({ field, ...plain[field], value: values[field] }))
  return [...others.filter(({ field }) => field !== 'note'), ...pours, ...others.filter(({ field }) => field === 'note')]
}

function plainValues(batch: Batch): Record<PlainField, string | null> {
  const { reactiveAt, firstSprayAt, lastSprayAt, closedAt, leftoverG, gunId, boothId, mixedByUserId, purpose, note, climate, viscosity } = batch
  return {
    reactiveAt, firstSprayAt, lastSprayAt, closedAt, leftoverG, gunId, boothId, mixedByUserId, purpose, note,
    airC: climate?.airC ?? null, rhPct: climate?.rhPct ?? null, surfaceC: climate?.surfaceC ?? null, materialC: viscosity?.materialC ?? null,
    viscosityCup: viscosity?.cup ?? null, viscositySeconds: viscosity?.seconds ?? null,
  }
}

/** What a field is called, also where the batch has lost sight of it. */
export function amendLabel(field: string, batch: Pick<Batch, 'components'>): string {
  const pour = pourFieldOf(field)
  if (!pour) return plain[field as PlainField]?.label ?? field
  const component = batch.components.find(({ index }) => index === pour.index)
  const place = (component?.pours.length ?? 0) > 1 ? `, weighing ${pour.position + 1}` : ''
  return `${component?.materialCode ?? 'Component'}${place}: ${pour.what === 'grams' ? 'grams' : 'lot'}`
}

/**
 * A value of an amendment for the eye.
 * @param name stands in place of an id
 */
export function amendValue(field: string, value: string | null, name: string | null, zone: string, now: number): string {
  if (value === null) return 'nothing'
  const pour = pourFieldOf(field)
  if (pour?.what === 'grams' || field === 'leftoverG') return `${grams(value)} g`
  if (plain[field as PlainField]?.input === 'instant') return `${day(Date.parse(value), zone, now)} ${clockSeconds(Date.parse(value), zone)}`
  if (field === 'rhPct') return `${percent(value)} RH`
  if (field === 'viscosityCup') return cupName(value)
  const unit = plain[field as PlainField]?.unit
  return unit ? `${value} ${unit}` : (name ?? value)
}
