import type { Knex } from 'knex'
import { nextNumber } from '../repositories/numbers'

/** Fewest digits of a code: `B-0421`. */
const digits = 4

/** The next code of a series, for example `B-0421`. */
export async function takeNumber(series: 'batch' | 'job', trx: Knex.Transaction): Promise<string> {
  const { prefix, number } = await nextNumber(series, trx)
  return `${prefix}${String(number).padStart(digits, '0')}`
}
