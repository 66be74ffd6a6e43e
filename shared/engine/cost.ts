import type { Dec } from './decimal'
import { print, readNonNegative, readPositive, sum } from './decimal'

/** Grams of one lot at that lot's price. The currency is the shop's. */
export interface CostLine {
  grams: string
  pricePerKg: string
}

/** Σ grams × price per kg ÷ 1000. Waste is a cost of its own: hand its lines in apart. */
export function costOf(lines: readonly CostLine[], field = 'lines'): string {
  return print(costDecimal(lines, field))
}

/** Cost of a square metre. */
export function costPerM2(lines: readonly CostLine[], areaM2: string): string {
  return print(costDecimal(lines, 'lines').div(readPositive(areaM2, 'areaM2')))
}

function costDecimal(lines: readonly CostLine[], field: string): Dec {
  return sum(lines.map(({ grams, pricePerKg }, index) =>
    readNonNegative(grams, `${field}.${index}.grams`)
      .times(readNonNegative(pricePerKg, `${field}.${index}.pricePerKg`)).div(1000)))
}
