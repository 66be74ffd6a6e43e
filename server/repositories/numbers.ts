import type { Knex } from 'knex'

/** Takes the next number of a series. The row stays locked until the transaction ends, so that no number is lost or doubled. */
export async function nextNumber(series: string, trx: Knex.Transaction): Promise<{ prefix: string; number: number }> {
  const row = await trx('number_series').where({ name: series }).forUpdate().first<{ prefix: string; next_number: number } | undefined>('prefix', 'next_number')
  if (!row) throw new Error(`there is no number series ${series}`)
  await trx('number_series').where({ name: series }).update({ next_number: row.next_number + 1 })
  return { prefix: row.prefix, number: row.next_number }
}
