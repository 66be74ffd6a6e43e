import type { DemoJob } from './jobs'
import type { BoothKey } from './places'
import { potLifeOf, suits, deviations, type Deviation } from './pot'
import type { Random } from './random'
import { the, type DemoShop } from './shop'
import { gunFigures, sprayMinutes, stagesOf, type Stage } from './stages'

const minuteMs = 60_000

/** A coat on one rack that waits for its booth. Instants in epoch milliseconds. */
export interface Task {
  job: DemoJob
  stages: Stage[]
  stage: number
  rack: number
  ready: number
  deadline: number | null
}

/** A pot on a day's list, with its instants. */
export interface PlannedPot {
  booth: BoothKey
  mix: string
  task: Task | null
  /** For a loose mix: what for, and whole grams. */
  loose: { purpose: string, grams: number } | null
  deviation: Deviation | null
  startAt: number
  firstAt: number
  lastAt: number
  closeAt: number
}

/** A working day; instants in epoch milliseconds. */
export interface Day {
  day: string
  opensAt: number
  noonFrom: number
  noonTo: number
  closesAt: number
  /** The next working day's opening. */
  reopensAt: number
  /** Degrees Celsius of each booth's air. */
  airC: ReadonlyMap<BoothKey, string>
}

/** Every so many pots something goes wrong. */
const deviationEvery = 18
/** Two coats on one day must both fit: the first of them starts no later than this after opening. */
const twoCoatsLatestMs = 4 * 60 * minuteMs
const sameDayMin = 600
/** What must be coated before this much of the next working day has gone is better done today. */
const morningMs = 5 * 60 * minuteMs

/** Deals the coats that are due to the booths, day by day, so that every window is met. */
export class Yard {
  readonly #shop: DemoShop
  readonly #random: Random
  #pending: Task[] = []
  #potsSince = 0
  #deviationsSoFar = 0

  constructor(shop: DemoShop, random: Random) {
    this.#shop = shop
    this.#random = random
  }

  get pending(): readonly Task[] {
    return this.#pending
  }

  /** Coats still to come in a booth, those of later days included. */
  backlog(booth: BoothKey): number {
    return this.#pending.reduce((sum, task) => sum + task.stages.slice(task.stage).filter((stage) => stage.booth === booth).length, 0)
  }

  /** Takes a job in: its first coat may go on as soon as it is prepared. */
  admit(job: DemoJob, readyAt: number): void {
    const stages = stagesOf(job)
    for (const rack of job.racks.keys()) this.#pending.push({ job, stages, stage: 0, rack, ready: readyAt, deadline: null })
  }

  /** A day's pots of one booth after the other, in time; `quota` bounds what is begun anew. */
  plan(day: Day, quotas: ReadonlyMap<BoothKey, number>, until: number): PlannedPot[] {
    const pots: PlannedPot[] = []
    const free = new Map([...quotas.keys()].map((booth) => [booth, day.opensAt + this.#random.between(10, 35) * minuteMs]))
    const used = new Map<BoothKey, number>()
    for (;;) {
      const next = this.#next(day, quotas, free, used)
      if (!next) return pots
      const pot = this.#potOf(next.task, next.at, day)
      if (pot.closeAt > until) {
        free.delete(pot.booth)
        continue
      }
      pots.push(pot)
      used.set(pot.booth, (used.get(pot.booth) ?? 0) + 1)
      free.set(pot.booth, pot.closeAt + this.#random.between(3, 12) * minuteMs)
      this.#advance(next.task, pot)
    }
  }

  /** A loose mix after the last planned pot of its booth, or null where the day has no room. */
  planLoose(day: Day, booth: BoothKey, mix: string, loose: NonNullable<PlannedPot['loose']>, pots: readonly PlannedPot[]): PlannedPot | null {
    const busyUntil = pots.filter((pot) => pot.booth === booth).reduce((latest, { closeAt }) => Math.max(latest, closeAt), day.opensAt)
    const startAt = afterNoon(busyUntil + this.#random.between(8, 25) * minuteMs, day)
    const firstAt = startAt + this.#random.between(9, 13) * minuteMs
    const lastAt = firstAt + this.#random.between(4, 9) * minuteMs
    const closeAt = lastAt + 4 * minuteMs
    return closeAt > day.closesAt ? null : { booth, mix, task: null, loose, deviation: null, startAt, firstAt, lastAt, closeAt }
  }

  /** The booth that is free first and what should go on there. */
  #next(day: Day, quotas: ReadonlyMap<BoothKey, number>, free: Map<BoothKey, number>, used: ReadonlyMap<BoothKey, number>): { task: Task, at: number } | null {
    while (free.size > 0) {
      const [booth, at] = [...free].reduce((first, one) => (one[1] < first[1] ? one : first))
      const full = (used.get(booth) ?? 0) >= (quotas.get(booth) ?? 0)
      const task = this.#choose(booth, at, day, full)
      if (task) return { task, at: afterNoon(at, day) }
      // Nothing is dry enough yet: the booth waits for what is next, or ends its day.
      const waitUntil = this.#nextReady(booth, at, day)
      if (waitUntil === null) free.delete(booth)
      else free.set(booth, waitUntil + this.#random.between(1, 5) * minuteMs)
    }
    return null
  }

  #choose(booth: BoothKey, at: number, day: Day, full: boolean): Task | null {
    const here = this.#pending.filter((task) => this.#stage(task).booth === booth)
    const urgent = here.filter(({ deadline }) => deadline !== null && deadline < day.reopensAt + morningMs)
    const soonest = urgent.filter(({ ready }) => ready <= at).sort((a, b) => (a.deadline ?? 0) - (b.deadline ?? 0))[0]
    if (soonest) return soonest
    if (full) return null
    return here.find((task) => task.ready <= at && this.#leavesRoom(task, at, day, urgent)) ?? null
  }

  /** Whether a coat can be begun: it ends in the day, before the next urgent one, and its own follower still fits. */
  #leavesRoom(task: Task, at: number, day: Day, urgent: readonly Task[]): boolean {
    const endsAt = this.#potOf(task, afterNoon(at, day), day, true).closeAt
    if (endsAt > day.closesAt) return false
    if (urgent.some(({ deadline }) => deadline !== null && deadline < endsAt + 40 * minuteMs)) return false
    const follower = task.stages[task.stage + 1]?.after
    const sameDay = follower !== null && follower?.until !== null && (follower?.until ?? sameDayMin) < sameDayMin
    return !sameDay || at <= day.opensAt + twoCoatsLatestMs
  }

  #nextReady(booth: BoothKey, at: number, day: Day): number | null {
    const ready = this.#pending
      .filter((task) => this.#stage(task).booth === booth && task.ready > at && task.ready < day.closesAt)
      .map((task) => task.ready)
    return ready.length === 0 ? null : Math.min(...ready)
  }

  #stage(task: Task): Stage {
    const stage = task.stages[task.stage]
    if (!stage) throw new Error(`the job ${task.job.code} has no such coat`)
    return stage
  }

  #potOf(task: Task, startAt: number, day: Day, trial = false): PlannedPot {
    const stage = this.#stage(task)
    const { revision } = the(this.#shop.mixes, stage.mix).current
    const deviation = trial ? null : this.#deviate(revision)
    const mixMin = trial ? 12 : this.#random.between(10, 14)
    const firstAt = startAt + (mixMin + parseInt(revision.inductionMin ?? '0', 10)) * minuteMs
    const mm2 = task.job.racks[task.rack]?.mm2 ?? 0
    const pace = gunFigures(stage.gun, stage.jobStep.step.shape).paceTenths
    const wanted = firstAt + Math.trunc((sprayMinutes(mm2 * stage.coatsInPot, pace) * (trial ? 100 : this.#random.between(88, 112)) * minuteMs) / 100)
    const lastAt = lastSpray(wanted, startAt, potLifeOf(revision, the(day.airC, stage.booth)), deviation)
    const closeAt = lastAt + (trial ? 5 : this.#random.between(3, 7)) * minuteMs
    const stopped = deviation === 'stopped' ? startAt + 10 * minuteMs : null
    return { booth: stage.booth, mix: stage.mix, task, loose: null, deviation, startAt, firstAt, lastAt: stopped ?? lastAt, closeAt: stopped ?? closeAt }
  }

  /** What goes wrong with the next pot, if it is time and the mix is one that it can happen to. */
  #deviate(revision: Parameters<typeof suits>[0]): Deviation | null {
    this.#potsSince++
    const kind = deviations[this.#deviationsSoFar % deviations.length]
    if (this.#potsSince < deviationEvery || !kind || !suits(revision, kind)) return null
    this.#potsSince = 0
    this.#deviationsSoFar++
    return kind
  }

  #advance(task: Task, pot: PlannedPot): void {
    this.#pending = this.#pending.filter((other) => other !== task)
    const again = pot.deviation === 'stopped'
    const stage = again ? task.stage : task.stage + 1
    const after = task.stages[stage]?.after
    if (again) this.#pending.unshift({ ...task, ready: pot.closeAt + 10 * minuteMs })
    else if (after) {
      this.#pending.push({
        ...task, stage, ready: pot.lastAt + after.from * minuteMs, deadline: after.until === null ? null : pot.firstAt + after.until * minuteMs,
      })
    }
  }
}

/** Nobody sprays through the break. */
const afterNoon = (at: number, { noonFrom, noonTo }: Day): number => (at >= noonFrom && at < noonTo ? noonTo : at)

/** The hardener goes in about this long after the cup is put on the scale. */
export const reactiveAfterMs = 3 * minuteMs

function lastSpray(wanted: number, startAt: number, life: ReturnType<typeof potLifeOf>, deviation: Deviation | null): number {
  if (!life) return wanted
  const reactiveAt = startAt + reactiveAfterMs
  const lateAt = reactiveAt + life.lateMin * minuteMs
  if (deviation === 'late') return lateAt + Math.trunc(((life.lifeMin - life.lateMin) * minuteMs) / 2)
  if (deviation === 'past-life') return reactiveAt + (life.lifeMin + 7) * minuteMs
  return Math.min(wanted, lateAt - 3 * minuteMs)
}
