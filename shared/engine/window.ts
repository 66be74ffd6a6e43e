import type { Beyond, TableValue, TemperatureRow } from './temperature'
import { readCelsius, readTable, valueAt } from './temperature'
import type { Dec } from './decimal'
import { print, readPositive } from './decimal'
import { EngineError } from './error'
import { earlier, later, readDuration } from './instants'
import { between, overcoatWindow, readSprayed, type Sprayed } from './overcoat'
import { DEFAULT_HALVES_PER_C } from './pot-life'
import type { OvercoatWindow } from './window-state'

export { overcoatWindow, type Sprayed } from './overcoat'

/** A coat on both faces and edges is several applications; together they run from the first to the last of them. */
export function spanOf(applications: readonly Sprayed[]): Sprayed {
  const [first, ...rest] = applications
  if (first === undefined) throw new EngineError('application-missing', 'applications', 'Nothing was sprayed')
  return rest.reduce((span, one) => ({
    firstSprayedAt: earlier(span.firstSprayedAt, one.firstSprayedAt),
    lastSprayedAt: later(span.lastSprayedAt, one.lastSprayedAt),
  }), first)
}

/** The four times of a coat, as its data sheet gives them. Durations in whole milliseconds. */
export interface CoatTimes {
  overcoatMinMs: number
  /** Latest without sanding; null: never too late. */
  overcoatMaxMs: number | null
  /** Earliest to sand; null where the sheet is silent: as the overcoat. */
  sandMinMs: number | null
  /** Latest after sanding, counted from the first moment of sanding; null: no limit. */
  sandedMaxMs: number | null
}

export interface CoatWindows {
  /** For the next coat: without sanding, or after it where the piece was sanded or denibbed. */
  overcoat: OvercoatWindow
  sanded: boolean
  /** Earliest moment to sand. */
  sandFromAt: number
  /** Sanding began before the coat could be sanded. */
  sandedTooEarly: boolean
}

/**
 * Windows over one coat. Sanding and denibbing move a piece to the second pair: it may be coated once the coat could be
 * sanded and the sanding is done, until the latest after sanding.
 * @param sanding first and last moment of sanding, null while not sanded
 */
export function coatWindows(
  sprayed: Sprayed, times: CoatTimes, sanding: Sprayed | null, workLeftMs = 0,
): CoatWindows {
  readSprayed(sprayed)
  const sandFromAt = sprayed.lastSprayedAt + readDuration(times.sandMinMs ?? times.overcoatMinMs, 'sandMinMs')
  if (sanding === null) {
    const overcoat = overcoatWindow({ ...sprayed, minMs: times.overcoatMinMs, maxMs: times.overcoatMaxMs, workLeftMs })
    return { overcoat, sanded: false, sandFromAt, sandedTooEarly: false }
  }
  readSprayed(sanding)
  const opensAt = later(sandFromAt, sanding.lastSprayedAt)
  const overcoat = times.sandedMaxMs === null
    ? { opensAt, closesAt: null, closingAt: null, empty: false }
    : between(opensAt, sanding.firstSprayedAt + readDuration(times.sandedMaxMs, 'sandedMaxMs'), workLeftMs)
  return { overcoat, sanded: true, sandFromAt, sandedTooEarly: sanding.firstSprayedAt < sandFromAt }
}

/** Which end of a window a sheet's table is for. */
export type WindowEnd = 'opens' | 'closes'

/**
 * Minutes of a sheet's table at a temperature: cold opens later, heat closes earlier. Never to the careless side of the
 * table: warmer than it does not open earlier, colder than it does not close later.
 */
export function windowMinutesAt(
  end: WindowEnd, table: readonly TemperatureRow[], temperatureC: string, halvesPerC = DEFAULT_HALVES_PER_C,
): { minutes: string, from: TableValue['from'] } {
  const [colder, hotter]: [Beyond, Beyond] = end === 'opens' ? ['rule', 'hold'] : ['hold', 'rule']
  const stepC: Dec = readPositive(halvesPerC, 'halvesPerC', '100')
  const { minutes, from } = valueAt(readTable(table, 'table'), readCelsius(temperatureC, 'temperatureC'), stepC, colder, hotter)
  return { minutes: print(minutes), from }
}
