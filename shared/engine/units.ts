import type { Dec } from './decimal'
import { D, print, readDecimal } from './decimal'
import { EngineError } from './error'

type Quantity = 'mass' | 'volume' | 'area' | 'length' | 'concentration' | 'speed' | 'temperature'

/** value in base unit = value × times ÷ over, plus an offset for temperatures. Exact. */
interface UnitRecord {
  quantity: Quantity
  times: string
  over?: string
  /** Added before the factor: °F − 32. */
  offset?: string
}

/** Exact by definition, NIST SP 811. Bases: g, mL, m², µm, g/L, m/s, °C. */
const UNITS = {
  'g': { quantity: 'mass', times: '1' },
  'kg': { quantity: 'mass', times: '1000' },
  'oz': { quantity: 'mass', times: '28.349523125' },
  'lb': { quantity: 'mass', times: '453.59237' },
  'mL': { quantity: 'volume', times: '1' },
  'L': { quantity: 'volume', times: '1000' },
  'fl-oz-us': { quantity: 'volume', times: '29.5735295625' },
  'gal-us': { quantity: 'volume', times: '3785.411784' },
  'gal-imp': { quantity: 'volume', times: '4546.09' },
  'm2': { quantity: 'area', times: '1' },
  'ft2': { quantity: 'area', times: '0.09290304' },
  'um': { quantity: 'length', times: '1' },
  'mm': { quantity: 'length', times: '1000' },
  'mil': { quantity: 'length', times: '25.4' },
  'in': { quantity: 'length', times: '25400' },
  'g/L': { quantity: 'concentration', times: '1' },
  'g/mL': { quantity: 'concentration', times: '1000' },
  'lb/gal-us': { quantity: 'concentration', times: '453.59237', over: '3.785411784' },
  'm/s': { quantity: 'speed', times: '1' },
  'ft/min': { quantity: 'speed', times: '0.3048', over: '60' },
  'degC': { quantity: 'temperature', times: '1' },
  'degF': { quantity: 'temperature', times: '5', over: '9', offset: '-32' },
} as const satisfies Record<string, UnitRecord>

export type Unit = keyof typeof UNITS

/**
 * A plain decimal from one unit to another of the same quantity.
 * @throws EngineError `units-differ`
 */
export function convertUnit(value: string, from: Unit, to: Unit): string {
  return print(convertDecimal(readDecimal(value, 'value'), from, to))
}

/** As {@link convertUnit}, not yet rounded. */
function convertDecimal(value: Dec, from: Unit, to: Unit): Dec {
  const source: UnitRecord = UNITS[from]
  const target: UnitRecord = UNITS[to]
  if (source.quantity !== target.quantity) {
    throw new EngineError('units-differ', 'to', 'The two units do not measure the same')
  }
  if (from === to) return value
  const based = value.plus(source.offset ?? 0).times(source.times).times(target.over ?? 1)
  return based.div(new D(target.times).times(source.over ?? 1)).minus(target.offset ?? 0)
}
