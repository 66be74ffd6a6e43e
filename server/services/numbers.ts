import type { Knex } from 'knex'
import { lockSeries, moveSeries } from '../repositories/numbers'

/** Fewest digits of a code: `B-0421`. */
const digits = 4

/** The series that give codes. */
type Series = 'batch' | 'job'

/** A number as it is spoken and written, for example `B-0421`. */
export const codeOf = (prefix: string, number: number): string => `${prefix}${String(number).padStart(digits, '0')}`

/** The next code of a series, for example `B-0421`. */
export async function takeNumber(series: Series, trx: Knex.Transaction): Promise<string> {
  const { prefix, next } = await lockSeries(series, trx)
  await moveSeries(series, next + 1, trx)
  return codeOf(prefix, next)
}
