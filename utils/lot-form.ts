import type { Lot } from '#shared/schemas/lots'
import { gramsOfKilograms } from '#shared/utils/lot-amount'
import { blanksToNull } from '~/utils/form-conflict'

/** What the fields of booking in hold. */
export interface LotValues extends Record<string, unknown> {
  materialId: string
  lotNumber: string
  amount: string
  unit: 'g' | 'kg' | 'L'
  receivedOn: string
  expiresOn: string
  pricePerKg: string
  place: string
}

const PLAIN = /^\d{1,6}(?:\.\d{1,7})?$/

/** The amount as the API takes it: grams, or litres that the server weighs by density. Text that is no number is refused there. */
function amountOf({ amount, unit }: LotValues): { grams: string | null, litres: string | null } {
  if (amount === '') return { grams: null, litres: null }
  if (unit === 'L') return { grams: null, litres: amount }
  return { grams: unit === 'kg' && PLAIN.test(amount) ? gramsOfKilograms(amount) : amount, litres: null }
}

export function lotBody(values: LotValues): unknown {
  const { materialId, lotNumber, receivedOn, expiresOn, pricePerKg, place } = values
  return { ...blanksToNull({ materialId, lotNumber, receivedOn, expiresOn, pricePerKg, place }) as object, ...amountOf(values) }
}

/** The fields that put right what was booked in. */
export const lotFixValues = (lot: Lot) => ({
  lotNumber: lot.lotNumber, receivedOn: lot.receivedOn, expiresOn: lot.expiresOn ?? '', pricePerKg: lot.pricePerKg ?? '', place: lot.place ?? '', version: lot.version,
})

export const LOT_LABELS: Readonly<Record<string, string>> = {
  lotNumber: 'Lot', receivedOn: 'Booked in on', expiresOn: 'Use by', pricePerKg: 'Price per kg', place: 'Where',
}
