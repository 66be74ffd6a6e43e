import type { BenchRun } from './bench-run'
import { benchPotLife } from './bench-tools'
import type { BenchTools } from './bench-tools'
import { addMinutes, minutesToMs, toMs } from './instant'

/** Instants of a pot, epoch milliseconds by the server's clock. */
interface BenchPotTimes {
  startsAt: number
  lateAt: number
  endsAt: number
}

/** The life of the pot at hand: as the server has it, else as reckoned here. Null while nothing in it reacts. */
export function potTimes(run: BenchRun, tools: BenchTools): BenchPotTimes | null {
  if (run.potLife !== null) {
    return { startsAt: toMs(run.potLife.startsAt), lateAt: toMs(run.potLife.lateAt), endsAt: toMs(run.potLife.endsAt) }
  }
  if (run.reactiveAt === null) return null
  const life = benchPotLife(tools.mix, { airC: run.climate?.airC ?? null, materialC: run.viscosity?.materialC ?? null })
  if (life === null) return null
  const startsAt = toMs(run.reactiveAt)
  return { startsAt, lateAt: addMinutes(startsAt, life.lateAfterMin), endsAt: addMinutes(startsAt, life.potLifeMin) }
}

/** Standing time after stirring, from the data sheet. Null while it is not stirred, or where the sheet asks for none. */
export function standing(run: BenchRun, tools: BenchTools): { startsAt: number, endsAt: number } | null {
  const ms = minutesToMs(tools.mix.inductionMin, 'up')
  if (run.stirredAt === null || ms === 0) return null
  const startsAt = toMs(run.stirredAt)
  return { startsAt, endsAt: startsAt + ms }
}
