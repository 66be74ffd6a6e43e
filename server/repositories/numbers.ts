import type { Knex } from 'knex'

/** Where a series stands: the number that is given next. */
export interface SeriesHead {
  prefix: string
  next: number
}

/** The series with its row locked until the transaction ends, so that no number is lost or doubled. */
export async function lockSeries(series: string, trx: Knex.Transaction): Promise<SeriesHead> {
  const row = await trx('number_series').where({ name: series }).forUpdate().first<{ prefix: string; next_number: number } | undefined>('prefix', 'next_number')
  if (!row) throw new Error(`there is no number series ${series}`)
  return { prefix: row.prefix, next: row.next_number }
}

/** Moves a locked series on to the number that is given next. */
export async function moveSeries(series: string, next: number, trx: Knex.Transaction): Promise<void> {
  await trx('number_series').where({ name: series }).update({ next_number: next })
}
