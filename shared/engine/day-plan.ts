import { EngineError } from './error'
import { MINUTE_MS, later, readDuration, readInstant, wholePart } from './instants'

/** One step of a schedule, in order. Durations in whole milliseconds. */
export interface DayStep {
  name: string
  /** Working time it takes; it may rest over a break of at most two hours, never over a night. */
  workMs: number
  /** From the end of the step before; 0 for the first. */
  minMs: number
  /** From the beginning of the step before until this one is done; null: no latest moment. */
  maxMs: number | null
}

/** A stretch of working time, resolved from the shop's calendar and zone. `to` is no longer part of it. */
interface WorkingInterval {
  from: number
  to: number
}

export interface DayPlanInput {
  steps: readonly DayStep[]
  /** In order, not overlapping. */
  workingIntervals: readonly WorkingInterval[]
  /** No start before it. */
  from: number
  /** Until when a start counts as today; the end of the first interval after `from` where not given. */
  todayUntil?: number | undefined
}

interface PlacedStep {
  step: number
  startsAt: number
  endsAt: number
  /** Null for the first step. */
  opensAt: number | null
  closesAt: number | null
}

interface BrokenWindow {
  /** Position of the step that cannot be placed, from 0. */
  step: number
  window: { opensAt: number, closesAt: number | null }
}

export interface DayPlan {
  /** For the latest start today; null where none works. */
  starts: PlacedStep[] | null
  /** Why none works today. */
  brokenBy: BrokenWindow | null
  /** The first start after today that works, to the minute; null where one works today or none is known. */
  nextStart: number | null
}

const MOST_STEPS = 30
const MOST_INTERVALS = 60
/** A coat is not left half sprayed for longer. */
const LONGEST_BREAK_MS = 120 * MINUTE_MS
const MOST_WORKING_MS = 14 * 24 * 60 * MINUTE_MS

/** What is known while one plan is searched. */
interface Search {
  steps: readonly DayStep[]
  intervals: readonly WorkingInterval[]
  /** Places from which the rest of the steps is known not to work. */
  hopeless: Set<string>
  deepest: BrokenWindow | null
}

/**
 * The latest start today, to the minute, for which every step lies in its window and in working time; or which window
 * breaks, and the next start that works. A step begins as early as its window and the shop allow, or with a later
 * interval where only that keeps the windows after it.
 * @throws EngineError `steps-count`, `intervals-count`, `intervals-order`, `horizon-too-long`
 */
export function planDay(input: DayPlanInput): DayPlan {
  const search = readSearch(input)
  const from = readInstant(input.from, 'from')
  const today = todayUntil(search.intervals, from, input.todayUntil)
  const latest = latestStart(search, from, today)
  if (latest !== null) return { starts: latest, brokenBy: null, nextStart: null }
  return { starts: null, brokenBy: search.deepest ?? outOfHours(from), nextStart: nextStart(search, later(from, today)) }
}

function latestStart(search: Search, from: number, until: number): PlacedStep[] | null {
  for (const interval of [...search.intervals].reverse()) {
    const first = later(interval.from, from)
    const end = interval.to < until ? interval.to : until
    for (let at = floorMinute(end - 1); at > first; at -= MINUTE_MS) {
      const plan = placeAll(search, at)
      if (plan !== null) return plan
    }
    const plan = first < end ? placeAll(search, first) : null
    if (plan !== null) return plan
  }
  return null
}

function nextStart(search: Search, after: number): number | null {
  for (const interval of search.intervals) {
    const first = later(interval.from, after)
    for (let at = first; at < interval.to; at = floorMinute(at) + MINUTE_MS) {
      if (placeAll(search, at) !== null) return at
    }
  }
  return null
}

function placeAll(search: Search, startsAt: number): PlacedStep[] | null {
  const first = search.steps[0]
  if (first === undefined) return null
  const endsAt = workFrom(search.intervals, startsAt, first.workMs)
  if (endsAt === null) {
    note(search, { step: 0, window: { opensAt: startsAt, closesAt: null } })
    return null
  }
  const placed: PlacedStep = { step: 0, startsAt, endsAt, opensAt: null, closesAt: null }
  const rest = placeRest(search, placed)
  return rest === null ? null : [placed, ...rest]
}

function placeRest(search: Search, before: PlacedStep): PlacedStep[] | null {
  const index = before.step + 1
  const step = search.steps[index]
  if (step === undefined) return []
  const key = `${index} ${before.startsAt} ${before.endsAt}`
  if (search.hopeless.has(key)) return null
  const opensAt = before.endsAt + step.minMs
  const closesAt = step.maxMs === null ? null : before.startsAt + step.maxMs
  for (const startsAt of candidates(search.intervals, opensAt)) {
    const endsAt = workFrom(search.intervals, startsAt, step.workMs)
    if (closesAt !== null && startsAt > closesAt) break
    if (endsAt === null || (closesAt !== null && endsAt > closesAt)) continue
    const placed: PlacedStep = { step: index, startsAt, endsAt, opensAt, closesAt }
    const rest = placeRest(search, placed)
    if (rest !== null) return [placed, ...rest]
  }
  search.hopeless.add(key)
  note(search, { step: index, window: { opensAt, closesAt } })
  return null
}

/** The first working moment from the opening on, then the beginning of every later interval. */
function candidates(intervals: readonly WorkingInterval[], opensAt: number): number[] {
  return intervals.filter(({ to }) => to > opensAt).map(({ from }) => later(from, opensAt))
}

/** The moment at which so much work, begun then, is done; null where a night or the end of the intervals comes first. */
function workFrom(intervals: readonly WorkingInterval[], startsAt: number, workMs: number): number | null {
  let left = workMs
  let rested = startsAt
  for (const { from, to } of intervals) {
    if (to <= startsAt) continue
    const begin = later(from, startsAt)
    if (begin - rested > LONGEST_BREAK_MS) return null
    rested = to
    if (begin + left <= to) return begin + left
    left -= to - begin
  }
  return null
}

/** Of all tries the one that came furthest tells best what stands in the way. */
function note(search: Search, broken: BrokenWindow): void {
  if (search.deepest === null || broken.step > search.deepest.step) search.deepest = broken
}

function outOfHours(from: number): BrokenWindow {
  return { step: 0, window: { opensAt: from, closesAt: null } }
}

function floorMinute(at: number): number {
  return wholePart(at, MINUTE_MS) * MINUTE_MS
}

function todayUntil(intervals: readonly WorkingInterval[], from: number, given: number | undefined): number {
  if (given !== undefined) return readInstant(given, 'todayUntil')
  return intervals.find(({ to }) => to > from)?.to ?? from
}

function readSearch({ steps, workingIntervals }: DayPlanInput): Search {
  if (steps.length < 1 || steps.length > MOST_STEPS) {
    throw new EngineError('steps-count', 'steps', `Give 1 to ${MOST_STEPS} steps`)
  }
  steps.forEach(({ workMs, minMs, maxMs }, index) => {
    readDuration(workMs, `steps.${index}.workMs`)
    readDuration(minMs, `steps.${index}.minMs`)
    if (maxMs !== null) readDuration(maxMs, `steps.${index}.maxMs`)
  })
  if (workingIntervals.length < 1 || workingIntervals.length > MOST_INTERVALS) {
    throw new EngineError('intervals-count', 'workingIntervals', `Give 1 to ${MOST_INTERVALS} working intervals`)
  }
  checkIntervals(workingIntervals)
  return { steps, intervals: workingIntervals, hopeless: new Set(), deepest: null }
}

function checkIntervals(intervals: readonly WorkingInterval[]): void {
  let end = 0
  let working = 0
  intervals.forEach(({ from, to }, index) => {
    const field = `workingIntervals.${index}`
    if (readInstant(from, `${field}.from`) < end || readInstant(to, `${field}.to`) <= from) {
      throw new EngineError('intervals-order', field, 'Working intervals follow each other and do not overlap')
    }
    end = to
    working += to - from
  })
  if (working > MOST_WORKING_MS) {
    throw new EngineError('horizon-too-long', 'workingIntervals', 'Plan at most 14 days of working time at once')
  }
}
