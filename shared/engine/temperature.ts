import type { Dec } from './decimal'
import { D, readDecimal, readPositive } from './decimal'
import { EngineError } from './error'

/** One row of a data sheet's table: so many minutes at so many °C. */
export interface TemperatureRow {
  c: string
  min: string
}

export interface TableRow {
  celsius: Dec
  minutes: Dec
}

/** What happens outside the table: the value of the end row is held, or the halving rule goes on from it. */
export type Beyond = 'hold' | 'rule'

const COLDEST = '-40'
const HOTTEST = '150'
const MOST_ROWS = 40
/** Ten years. */
export const LONGEST_MINUTES = '5256000'

export function readCelsius(text: string, field: string): Dec {
  return readDecimal(text, field, { min: COLDEST, max: HOTTEST })
}

/** Minutes of a data sheet, more than 0 and at most ten years. */
export function readMinutes(text: string, field: string): Dec {
  return readPositive(text, field, LONGEST_MINUTES)
}

/** As {@link readMinutes}, 0 allowed. */
export function readWait(text: string, field: string): Dec {
  return readDecimal(text, field, { min: '0', max: LONGEST_MINUTES })
}

/**
 * Sorts a sheet's table by temperature. Reactions run faster when warmer: minutes may not rise with temperature.
 * @throws EngineError `table-empty`, `table-too-long`, `table-twice`, `table-rising`
 */
export function readTable(rows: readonly TemperatureRow[], field: string): TableRow[] {
  if (rows.length === 0) throw new EngineError('table-empty', field, 'The table has no row')
  if (rows.length > MOST_ROWS) throw new EngineError('table-too-long', field, `A table has at most ${MOST_ROWS} rows`)
  const table = rows.map(({ c, min }, index) => ({
    celsius: readCelsius(c, `${field}.${index}.c`),
    minutes: readMinutes(min, `${field}.${index}.min`),
  })).sort((a, b) => a.celsius.comparedTo(b.celsius))
  table.forEach(({ celsius, minutes }, index) => {
    const colder = table[index - 1]
    if (colder === undefined) return
    if (colder.celsius.eq(celsius)) {
      throw new EngineError('table-twice', field, 'The table names one temperature twice')
    }
    if (minutes.gt(colder.minutes)) {
      throw new EngineError('table-rising', field, 'The table must not grow longer as it gets warmer')
    }
  })
  return table
}

/** minutes · 2^((reference − temperature) ÷ step): halves for every `stepC` warmer, doubles for every `stepC` colder. */
export function halvingRule(minutes: Dec, referenceC: Dec, temperatureC: Dec, stepC: Dec): Dec {
  if (temperatureC.eq(referenceC)) return minutes
  return minutes.times(D.pow(2, referenceC.minus(temperatureC).div(stepC)))
}

export interface TableValue {
  minutes: Dec
  /** Where the value comes from. */
  from: 'table' | 'held' | 'rule'
}

/** Between rows log-linear; outside them as told. `table` as {@link readTable} gives it. */
export function valueAt(
  table: readonly TableRow[], temperatureC: Dec, stepC: Dec, colder: Beyond, hotter: Beyond,
): TableValue {
  const above = table.findIndex(({ celsius }) => celsius.gte(temperatureC))
  const upper = table[above]
  const lower = table[above < 0 ? table.length - 1 : above - 1]
  if (upper?.celsius.eq(temperatureC)) return { minutes: upper.minutes, from: 'table' }
  if (upper !== undefined && lower !== undefined) {
    return { minutes: between(lower, upper, temperatureC), from: 'table' }
  }
  const end = upper ?? lower
  if (end === undefined) throw new EngineError('table-empty', 'table', 'The table has no row')
  if ((upper === undefined ? hotter : colder) === 'hold') return { minutes: end.minutes, from: 'held' }
  return { minutes: halvingRule(end.minutes, end.celsius, temperatureC, stepC), from: 'rule' }
}

function between(lower: TableRow, upper: TableRow, temperatureC: Dec): Dec {
  const share = temperatureC.minus(lower.celsius).div(upper.celsius.minus(lower.celsius))
  return lower.minutes.times(upper.minutes.div(lower.minutes).pow(share))
}
