import { Decimal } from 'decimal.js'

interface Limit {
  low: string
  high: string
  lowWord: string
  highWord: string
}

/**
 * What a booth's air is commonly kept within. Common practice, no source: the data sheet of what is sprayed decides.
 * Degrees Celsius, and per cent of relative humidity.
 */
const limits = {
  temperature: { low: '15', high: '30', lowWord: 'cold', highWord: 'warm' },
  humidity: { low: '30', high: '65', lowWord: 'dry', highWord: 'damp' },
} as const satisfies Record<string, Limit>

/** The word for a value, a plain decimal, that lies outside what is commonly sprayed in; null for one within. */
export function climateWord(what: keyof typeof limits, value: string): string | null {
  const { low, high, lowWord, highWord } = limits[what]
  if (new Decimal(value).lt(low)) return lowWord
  return new Decimal(value).gt(high) ? highWord : null
}
