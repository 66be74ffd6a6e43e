import * as z from 'zod/mini'
import { D } from '../engine/decimal'

interface Range {
  /** Smallest value that is let through. */
  least?: string
  /** The value must be larger than this. */
  above?: string
  most: string
  /** Decimals that are kept. */
  decimals: number
}

/**
 * A plain decimal with a point within a range: what a column of the record can hold and what makes sense.
 *
 * @param message what to enter instead, without the value
 */
export function quantity({ least, above, most, decimals }: Range, message: string) {
  return z.string(message).check(
    z.trim(),
    z.regex(/^\d{1,9}(?:\.\d{1,12})?$/, { error: message, abort: true }),
    z.refine((text) => {
      const value = new D(text)
      const fits = value.lte(most) && (least === undefined || value.gte(least)) && (above === undefined || value.gt(above))
      return fits && value.decimalPlaces() <= decimals
    }, message),
  )
}
