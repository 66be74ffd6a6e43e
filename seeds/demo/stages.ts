import type { DemoJob, JobStep } from './jobs'
import { guns, type BoothKey, type GunKey } from './places'
import type { DemoStep } from './schedules'

/** One coat of a job, mixed for itself. */
export interface Stage {
  jobStep: JobStep
  mix: string
  booth: BoothKey
  gun: GunKey
  coat: number
  /** Coats that one pot is mixed for: more than one where they follow wet on wet. */
  coatsInPot: number
  /** Minutes after the coat before it; null for the first. */
  after: { from: number, until: number | null } | null
}

/** Coats closer together than this come from one pot, in minutes. */
const wetOnWetMin = 30
const sandingMin = 45

/** The coats of a job in their order, with the windows between them. */
export function stagesOf(job: DemoJob): Stage[] {
  const stages: Stage[] = []
  let before: DemoStep | null = null
  let between: DemoStep[] = []
  for (const jobStep of job.steps) {
    const { step, booth, gun } = jobStep
    if (step.kind !== 'coat') {
      between.push(step)
      continue
    }
    if (!step.mix || !booth || !gun) throw new Error(`the coat ${step.title} has no mix, booth or gun`)
    const common = { jobStep, mix: step.mix, booth, gun }
    const first = before ? windowBetween(before, between) : null
    const coats = step.coats ?? 1
    const wet = step.interval !== undefined && step.interval[1] < wetOnWetMin
    stages.push({ ...common, coat: 1, coatsInPot: wet ? coats : 1, after: first })
    for (let coat = 2; coat <= coats && !wet && step.interval; coat++) {
      stages.push({ ...common, coat, coatsInPot: 1, after: { from: step.interval[0], until: step.interval[1] } })
    }
    before = step
    between = []
  }
  return stages
}

function windowBetween(before: DemoStep, between: readonly DemoStep[]): { from: number, until: number | null } {
  const sanded = between.some(({ kind }) => kind === 'sand')
  const waited = between.reduce((sum, { dry }) => sum + (dry ?? 0), 0)
  const from = Math.max(before.overcoat?.[0] ?? 0, waited, sanded ? before.sanding?.[0] ?? 0 : 0)
  const until = sanded ? before.sanding?.[1] ?? null : before.overcoat?.[1] ?? null
  return { from: from + (sanded ? sandingMin : 0), until }
}

/** Transfer efficiency, residue and pace of a gun on a shape of work. */
export function gunFigures(key: GunKey, shape: DemoStep['shape']): { efficiencyPct: string, residueG: string, paceTenths: number } {
  const gun = guns.find((one) => one.key === key)
  if (!gun) throw new Error(`no gun ${key}`)
  const [whole = '0', tenth = '0'] = gun.pace.split('.')
  return { efficiencyPct: gun[shape ?? 'flat'], residueG: gun.residue, paceTenths: parseInt(whole, 10) * 10 + parseInt(tenth, 10) }
}

/** Whole minutes that a gun takes for an area in square millimetres, turning and racking included. */
export const sprayMinutes = (mm2: number, paceTenths: number): number => Math.trunc((mm2 * 6) / (paceTenths * 10_000)) + 1
