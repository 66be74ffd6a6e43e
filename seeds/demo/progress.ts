import type { DemoJob, JobMoves, StepState } from './jobs'
import { stagesOf, type Stage } from './stages'
import type { Task } from './yard'

const minuteMs = 60_000

interface Progress {
  job: DemoJob
  stages: Stage[]
  /** Racks that have each coat. */
  done: number[]
  lastSprayAt: number
}

/** Where every job stands, as its coats go on. */
export class JobBook {
  readonly #jobs = new Map<string, Progress>()

  add(job: DemoJob): void {
    const stages = stagesOf(job)
    this.#jobs.set(job.id, { job, stages, done: stages.map(() => 0), lastSprayAt: 0 })
  }

  get open(): DemoJob[] {
    return [...this.#jobs.values()].map(({ job }) => job).filter(({ state }) => state === 'planned' || state === 'running')
  }

  /** A rack has got a coat. */
  sprayed({ job, stage }: Pick<Task, 'job' | 'stage'>, lastAt: number): void {
    const progress = this.#jobs.get(job.id)
    if (!progress) throw new Error(`the job ${job.code} is not in the book`)
    progress.done[stage] = (progress.done[stage] ?? 0) + 1
    progress.lastSprayAt = Math.max(progress.lastSprayAt, lastAt)
  }

  /** What has moved since the last look; the book moves along. `waiting`: coats that could go on now. */
  moves(now: number, waiting: readonly Task[]): JobMoves {
    const moves: JobMoves = { jobs: new Map(), steps: new Map() }
    for (const progress of this.#jobs.values()) {
      const { job } = progress
      if (job.state === 'done' || job.state === 'held') continue
      for (const step of job.steps) {
        const state = this.#stateOf(progress, step.position, now, waiting.filter((task) => task.job === job))
        if (state !== step.state) moves.steps.set(step.id, { state })
        step.state = state
      }
      const state = job.steps.every((step) => step.state === 'done') ? 'done' : progress.done.some((racks) => racks > 0) ? 'running' : job.state
      if (state !== job.state) moves.jobs.set(job.id, state)
      job.state = state
    }
    return moves
  }

  #stateOf({ job, stages, done, lastSprayAt }: Progress, position: number, now: number, waiting: readonly Task[]): StepState {
    const step = job.steps[position]?.step
    const racks = job.racks.length
    const own = stages.flatMap((stage, index) => (stage.jobStep.position === position ? [done[index] ?? 0] : []))
    if (own.length > 0) return own.every((count) => count >= racks) ? 'done' : own.some((count) => count > 0) ? 'started' : 'to-come'
    const next = stages.findIndex((stage) => stage.jobStep.position > position)
    if (next === -1) {
      const dried = lastSprayAt + trailingMinutes(job, position) * minuteMs
      return done.at(-1) === racks && now >= dried ? 'done' : 'to-come'
    }
    const begun = (done[next] ?? 0) > 0
    const prepared = waiting.length === racks && waiting.every((task) => task.stage >= next && task.ready <= now)
    return begun || (prepared && step?.kind !== 'inspect') ? 'done' : 'to-come'
  }
}

/** Drying between the last coat and this step, itself included, in minutes. */
function trailingMinutes(job: DemoJob, position: number): number {
  const lastCoat = job.steps.findLastIndex(({ step }) => step.kind === 'coat')
  return job.steps.slice(lastCoat + 1, position + 1).reduce((sum, { step }) => sum + (step.dry ?? 0), 0)
}
