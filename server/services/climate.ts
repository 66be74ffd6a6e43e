import type { Knex } from 'knex'
import { calculateDewPoint } from '#shared/engine/climate'
import { D } from '#shared/engine/decimal'
import type { ClimateCreateBody, ClimateList, ClimateListQuery, ClimateReading } from '#shared/schemas/climate'
import { climateWord } from '#shared/utils/climate-limits'
import { toMs } from '#shared/utils/instant'
import { audienceOf } from '../live/audience'
import { insertReading, latestReadings, listReadings, type StoredReading } from '../repositories/climate'
import { isActive } from '../repositories/devices'
import { userIdOf, type Context } from '../utils/context'
import { invalid } from '../utils/errors'
import { newId } from '../utils/ids'
import { decodeCursor, encodeCursor } from '../utils/keyset'
import { isoOf, toInstant } from '../utils/rows'
import { mutate } from '../utils/transactions'

/** Decimals of a temperature as it is stored. */
const storedDecimals = 2

const dewPointOf = ({ airC, rhPct, surfaceC }: Pick<StoredReading, 'airC' | 'rhPct' | 'surfaceC'>) =>
  calculateDewPoint({ airC, rhPct, surfaceC: surfaceC ?? undefined })

function describe(reading: StoredReading): ClimateReading {
  const { marginC, ok } = dewPointOf(reading)
  return {
    ...reading, marginC, ok,
    airWord: climateWord('temperature', reading.airC),
    surfaceWord: reading.surfaceC === null ? null : climateWord('temperature', reading.surfaceC),
    rhWord: climateWord('humidity', reading.rhPct),
  }
}

/**
 * Notes what a booth's instrument says now. The dew point follows from it.
 *
 * @throws Refusal 400 for an unknown booth, EngineError for air or humidity out of the formula's range
 */
export function recordClimate(ctx: Context, body: ClimateCreateBody): Promise<ClimateReading> {
  return mutate(ctx, async (m) => {
    if (!(await isActive('booths', body.boothId, m.trx))) throw invalid([{ path: 'boothId', message: 'There is no such booth.' }])
    const dewPointC = new D(dewPointOf(body).dewPointC).toDecimalPlaces(storedDecimals).toString()
    const { boothId, airC, rhPct, surfaceC } = body
    const reading = { id: newId(), boothId, airC, rhPct, surfaceC, dewPointC, source: 'typed', userId: userIdOf(ctx.principal) } as const
    await insertReading({ ...reading, at: m.now }, m.trx)
    m.audit({ action: 'climate.recorded', subject: `booth:${boothId}`, facts: { readingId: reading.id, airC, rhPct, surfaceC, dewPointC } })
    const answer = describe({ ...reading, at: isoOf(toInstant(m.now)) })
    m.publish({ type: 'climate', subject: `booth:${boothId}`, boothId, payload: answer })
    return answer
  })
}

/**
 * Readings of one booth or all, newest first. A booth's screen sees those of its booth.
 *
 * @throws Refusal 400 for a cursor of another list, 403 when a screen asks for another booth
 */
export async function listClimate(ctx: Context, query: ClimateListQuery): Promise<ClimateList> {
  const { boothId } = audienceOf(ctx.principal, query.boothId)
  const [at, id] = query.cursor ? decodeCursor(query.cursor, ['instant', 'id']) : []
  const after = at === undefined ? undefined : { at: Number(at), id: String(id) }
  const rows = await listReadings({ boothId: boothId ?? undefined, after, limit: query.limit + 1 }, ctx.db)
  const items = rows.slice(0, query.limit).map(describe)
  const last = rows.length > query.limit ? items.at(-1) : undefined
  return { items, nextCursor: last ? encodeCursor([toMs(last.at), last.id]) : null }
}

/** The last reading of each booth with what follows from it, by the booth's id. */
export async function latestClimate(db: Knex | Knex.Transaction): Promise<Map<string, ClimateReading>> {
  const readings = await latestReadings(db)
  return new Map([...readings].map(([boothId, reading]) => [boothId, describe(reading)]))
}
