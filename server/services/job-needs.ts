import { planBatch } from '#shared/engine/batch'
import { D, ZERO, print, type Dec } from '#shared/engine/decimal'
import { EngineError } from '#shared/engine/error'
import { line, type WorkingLine } from '#shared/engine/working'
import type { Job, JobNeed, JobPiece } from '#shared/schemas/jobs'
import type { ScheduleStep } from '#shared/schemas/schedules'
import type { Gun } from '#shared/schemas/shop'
import type { JobApplication, StoredJobStep } from '../repositories/jobs'
import { findMaterials, stockOf } from '../repositories/materials'
import type { StoredStep } from '../repositories/schedules'
import { findGuns } from '../repositories/shop'
import type { Context } from '../utils/context'
import { coatsDone } from './job-progress'
import { needsReorder } from './materials'
import { engineMix } from './mixes'
import { stepMixes } from './schedules'

interface Input {
  steps: readonly { bare: Pick<StoredJobStep, 'id' | 'state' | 'gunId'>, asked: ScheduleStep }[]
  pieces: readonly JobPiece[]
  applications: readonly JobApplication[]
  storedSteps: readonly StoredStep[]
  today: string
}

/** Grams of one material, with the lines that lead to them. */
interface Sum {
  role: JobNeed['role']
  grams: Dec
  lines: WorkingLine[]
}

/** Finer than any scale: what is needed is not rounded to a pot's targets. */
const fineDivisionG = '0.0001'

/**
 * What the coats not yet on need of every material, against the stock that may be used today. Held pieces are left out.
 * One pot's residue of the gun is added for each step; how many pots it will take is the bench's to plan.
 */
export async function materialNeeds(ctx: Context, input: Input): Promise<Pick<Job, 'needs' | 'needsMissing'>> {
  const open = input.steps.filter(({ bare, asked }) => asked.kind === 'coat' && bare.state !== 'done')
  const [mixes, guns] = await Promise.all([
    stepMixes(ctx, input.storedSteps),
    findGuns([...new Set(open.flatMap(({ bare }) => bare.gunId ?? []))], ctx.db),
  ])
  const sums = new Map<string, Sum>()
  const needsMissing: Job['needsMissing'] = []
  for (const { bare, asked } of open) {
    const coatedM2 = openArea(bare.id, asked, input)
    if (coatedM2.isZero()) continue
    const revision = mixes.get(asked.mix?.id ?? '')?.revision ?? null
    const gun = guns.find(candidate => candidate.id === bare.gunId) ?? null
    const reason = revision === null ? 'The step has no mix.' : lackOf(asked, gun)
    if (revision === null || reason !== null) {
      needsMissing.push({ jobStepId: bare.id, title: asked.title, reason: reason ?? 'The step has no mix.' })
      continue
    }
    try {
      const plan = planBatch({
        mix: engineMix(revision),
        areaM2: print(coatedM2),
        filmWeightGsm: asked.filmWeightGsm ?? undefined,
        filmWeightIs: asked.filmWeightIs ?? undefined,
        transferEfficiencyPct: gun ? efficiencyOf(gun, asked) : undefined,
        reserveG: gun?.residueG,
        scaleDivisionG: fineDivisionG,
      })
      revision.components.forEach((component, place) => {
        const exactG = new D(plan.components[place]?.exactG ?? '0')
        const sum = sums.get(component.materialId) ?? { role: component.role, grams: ZERO, lines: [] }
        sums.set(component.materialId, {
          role: sum.role,
          grams: sum.grams.plus(exactG),
          lines: [...sum.lines, line(asked.title, `${plan.exactTotalG} g × ${plan.components[place]?.sharePct ?? '0'} %`, exactG, 'g')],
        })
      })
    }
    catch (error) {
      if (!(error instanceof EngineError)) throw error
      needsMissing.push({ jobStepId: bare.id, title: asked.title, reason: error.message })
    }
  }
  return { needs: await compare(ctx, sums, input.today), needsMissing }
}

/** Square metres still to coat: each piece as often as coats are missing on it. */
function openArea(jobStepId: string, asked: ScheduleStep, { pieces, applications }: Input): Dec {
  const coats = asked.coats ?? 1
  return pieces.filter(piece => piece.heldReason === null).reduce((area, piece) => {
    const applied = applications.filter(application => application.jobStepId === jobStepId && application.pieceIds.includes(piece.id))
    return area.plus(new D(piece.areaM2).times(coats - coatsDone(applied, { coats, faces: asked.faces })))
  }, ZERO)
}

function lackOf(asked: ScheduleStep, gun: Gun | null): string | null {
  if (asked.filmWeightGsm === null || asked.filmWeightIs === null) return 'The step has no wet coat weight.'
  return asked.filmWeightIs === 'deposited' && gun === null ? 'No gun is chosen, so its transfer efficiency is not known.' : null
}

function efficiencyOf(gun: Gun, asked: ScheduleStep): string {
  if (asked.gunShape === 'frames') return gun.efficiencyFramesPct
  return asked.gunShape === 'sticks' ? gun.efficiencySticksPct : gun.efficiencyFlatPct
}

async function compare(ctx: Context, sums: ReadonlyMap<string, Sum>, today: string): Promise<JobNeed[]> {
  const ids = [...sums.keys()]
  const [materials, stock] = await Promise.all([findMaterials(ids, ctx.db), stockOf(ids, today, ctx.db)])
  return ids.flatMap((id) => {
    const material = materials.find(candidate => candidate.id === id)
    const sum = sums.get(id)
    if (!material || !sum) return []
    const usableStockG = stock.get(id)?.usableStockG ?? '0'
    const after = new D(usableStockG).minus(sum.grams)
    return [{
      materialId: id,
      materialCode: material.code,
      materialName: material.name,
      role: sum.role,
      neededG: print(sum.grams),
      usableStockG,
      afterG: print(after),
      reorderPointG: material.reorderPointG,
      reorder: needsReorder(print(after), material.reorderPointG),
      short: after.isNegative(),
      takesPct: takesPct(sum.grams, new D(usableStockG)),
      working: [...sum.lines, line('still needed', sum.lines.map(part => part.value).join(' + '), sum.grams, 'g')],
    }]
  })
}

/** Share of the usable stock that the job takes; null where there is none. */
function takesPct(needed: Dec, stock: Dec): string | null {
  return stock.gt(0) ? print(needed.times(100).div(stock).toDecimalPlaces(4)) : null
}
