import { D, floorTo, print } from '../engine/decimal'
import type { PourAnswer } from '../engine/pour'
import { inCupG, NO_READING, poursOf } from './bench-run'
import type { BenchRun } from './bench-run'
import { potTimes } from './bench-life'
import type { BenchTools } from './bench-tools'

/** The run-out time against the mix's own; `other-cup`: measured in a cup that the sheet gives no time for. */
type ViscosityVerdict = 'too-thick' | 'in-range' | 'too-thin' | 'other-cup'

/** How the viscosity stands. Null where nothing was measured since the last thinner, or the mix asks for nothing. */
export function viscosityVerdict(run: BenchRun, tools: BenchTools): ViscosityVerdict | null {
  const { viscosityCup: cup, viscositySecondsMin: low, viscositySecondsMax: high } = tools.mix
  const { viscosity } = run
  if (viscosity === null || cup === null || low === null || isMeasuredBefore(run, tools)) return null
  if (viscosity.cup !== cup) return 'other-cup'
  if (new D(viscosity.seconds).gt(high ?? low)) return 'too-thick'
  return new D(viscosity.seconds).lt(low) ? 'too-thin' : 'in-range'
}

/** The viscosity was noted before thinner went in: it is not that of what is in the cup. */
export function isMeasuredBefore(run: BenchRun, tools: BenchTools): boolean {
  const thinners = tools.parts.filter(({ role }) => role === 'thinner').map(({ index }) => index)
  const { viscosity, viscosityAt } = run
  if (viscosity === null || viscosityAt === null) return false
  return poursOf(run).some(({ index, round, at }) => round > 0 && thinners.includes(index) && at > viscosityAt)
}

/** Thinner that may still go in. */
interface ThinnerRoom {
  index: number
  roomG: string
}

/**
 * How much thinner the mix still takes within its range, the cup and the scale. Null where its parts are no range,
 * nothing is left of it, or the pot's life is up: such a pot is never thinned.
 *
 * @param now epoch milliseconds by the server's clock
 */
export function thinnerRoom(run: BenchRun, tools: BenchTools, answer: PourAnswer, now: number): ThinnerRoom | null {
  const thinner = tools.parts.find(({ role, partsMax }) => role === 'thinner' && partsMax !== null)
  const judged = thinner === undefined ? undefined : answer.components[thinner.index]
  const times = potTimes(run, tools)
  if (thinner === undefined || judged === undefined || (times !== null && now >= times.endsAt)) return null
  const ofRange = new D(judged.highG).minus(judged.pouredG ?? '0')
  const ofCup = tools.limitG === null ? ofRange : new D(tools.limitG).minus(inCupG(run))
  const room = floorTo(D.min(ofRange, ofCup), new D(tools.scale.divisionG))
  return room.lte(0) ? null : { index: thinner.index, roomG: print(room) }
}

/** Back to the scale for thinner within its range: a weighing of its own, stirred in before anything else. */
export function addThinner(run: BenchRun, index: number): BenchRun {
  const round = 1 + Math.max(...run.walk.map(step => (step.kind === 'pour' ? step.round : 0)))
  return {
    ...run,
    stage: 'pour',
    walk: [...run.walk, { kind: 'pour', index, round }, { kind: 'stir' }],
    place: run.walk.length,
    reading: NO_READING,
    taredG: '0',
  }
}
