import { newId } from '../../server/utils/ids'
import type { Context } from '../../server/utils/context'
import { takeNumber } from '../../server/services/numbers'
import { toInstant } from '../../server/utils/rows'
import { mutate } from '../../server/utils/transactions'
import { areaOf, cutLists, type DemoPiece } from './cut-lists'
import { born } from './found-places'
import { guns, type BoothKey, type GunKey } from './places'
import type { DemoOrder } from './orders'
import { boothOf, type DemoStep } from './schedules'
import { the, type DemoShop } from './shop'

export type StepState = 'to-come' | 'started' | 'done'

export interface JobStep {
  id: string
  position: number
  step: DemoStep
  booth: BoothKey | null
  gun: GunKey | null
  state: StepState
}

/** Pieces that travel together; each rack is one pot of every coat. */
interface Rack {
  pieceIds: string[]
  mm2: number
}

export interface DemoJob {
  id: string
  code: string
  order: DemoOrder
  revisionId: string
  steps: JobStep[]
  racks: Rack[]
  state: 'planned' | 'running' | 'done' | 'held'
}

/** About what one pot covers, in square millimetres. */
const rackMm2 = 9_500_000
const rackNames = 'ABCDEFGHJKLM'

type RackedPiece = DemoPiece & { rack: number }

/** Deals the pieces to racks of about the same area; a line that spans two racks becomes two. */
export function rackPieces(pieces: readonly DemoPiece[]): RackedPiece[] {
  const total = pieces.reduce((sum, piece) => sum + areaOf(piece).mm2, 0)
  const count = Math.min(rackNames.length, Math.trunc((total + rackMm2 - 1) / rackMm2))
  const dealt: RackedPiece[] = []
  let filled = 0
  for (const piece of pieces) {
    const one = areaOf({ ...piece, quantity: 1 }).mm2
    for (let n = 0; n < piece.quantity; n++) {
      // The middle of a piece decides, so that the last one never starts a rack of its own.
      const rack = Math.trunc(((2 * filled + one) * count) / (2 * total))
      const last = dealt.at(-1)
      if (last && last.label === piece.label && last.rack === rack) last.quantity++
      else dealt.push({ ...piece, quantity: 1, rack })
      filled += one
    }
  }
  return dealt
}

/** The gun for a coat: what its booth has for so much area and such a material. */
export function gunFor(booth: BoothKey, mix: string, mm2: number): GunKey {
  if (mix === 'TX-100') return 3
  const large = mm2 >= 5_000_000
  const wanted = large ? ['pressure-pot', 'pump'] : ['cup-gun']
  const gun = guns.find((one) => one.booth === booth && wanted.includes(one.kind))
  if (!gun) throw new Error(`booth ${booth} has no gun for this`)
  return gun.key
}

/** Books a job in: its cut list, dealt to racks, and its steps by the schedule's released revision. */
export function openJob(ctx: Context, shop: DemoShop, order: DemoOrder, { dueOn, state }: { dueOn: string, state: DemoJob['state'] }): Promise<DemoJob> {
  return mutate(ctx, async (m) => {
    const revision = the(shop.schedules, order.schedule).current
    const code = await takeNumber('job', m.trx)
    const pieces = rackPieces(cutLists[order.cut](order.size)).map((piece) => ({ ...piece, id: newId() }))
    const racks = racksOf(pieces)
    const smallest = Math.min(...racks.map(({ mm2 }) => mm2))
    const job: DemoJob = {
      id: newId(), code, order, revisionId: revision.id, racks, state,
      steps: revision.steps.map(({ position, step }) => {
        const booth = step.mix ? boothOfMix(shop, step.mix) : null
        return { id: newId(), position, step, booth, gun: booth && step.mix ? gunFor(booth, step.mix, smallest) : null, state: 'to-come' }
      }),
    }
    await m.trx('jobs').insert({
      id: job.id, code, title: order.title, customer: order.customer, schedule_revision_id: revision.id, due_on: dueOn, state, ...born(m.now),
    })
    await m.trx('pieces').insert(pieces.map((piece, position) => ({
      id: piece.id, job_id: job.id, position, label: piece.label, length_mm: piece.lengthMm, width_mm: piece.widthMm,
      thickness_mm: piece.thicknessMm, quantity: piece.quantity, faces: piece.faces, area_m2: areaOf(piece).m2,
      rack: `Rack ${rackNames[piece.rack] ?? '?'}`, ...born(m.now),
    })))
    await m.trx('job_steps').insert(job.steps.map(({ id, position, booth, gun }) => ({
      id, job_id: job.id, schedule_step_id: the(new Map(revision.steps.map((made) => [made.position, made.id])), position), position,
      booth_id: booth ? the(shop.booths, booth) : null, gun_id: gun ? the(shop.guns, gun) : null, ...born(m.now),
    })))
    m.audit({ action: 'job.created', subject: `job:${job.id}`, facts: { code, pieces: pieces.length, scheduleRevisionId: revision.id } })
    return job
  })
}

function racksOf(pieces: readonly (RackedPiece & { id: string })[]): Rack[] {
  const racks: Rack[] = []
  for (const piece of pieces) {
    const rack = (racks[piece.rack] ??= { pieceIds: [], mm2: 0 })
    rack.pieceIds.push(piece.id)
    rack.mm2 += areaOf(piece).mm2
  }
  return racks
}

/** The booth of a mix, by the chemistry of its base. */
export function boothOfMix(shop: DemoShop, code: string): BoothKey {
  const part = the(shop.mixes, code).current.revision.parts.find(({ role }) => role === 'base')
  if (!part) throw new Error(`the mix ${code} has no base`)
  return boothOf(the(shop.materials, part.material).material.chemistry)
}

/** Where a job stands, written at the end of a day with everything else that moved. */
export interface JobMoves {
  jobs: Map<string, DemoJob['state']>
  steps: Map<string, { state: StepState, benchListOn?: string | null }>
}

/** Writes what moved in one transaction. */
export function moveJobs(ctx: Context, moves: JobMoves): Promise<void> {
  return mutate(ctx, async (m) => {
    const moved = { updated_at: toInstant(m.now), version: m.trx.raw('version + 1') }
    for (const [id, state] of moves.jobs) await m.trx('jobs').where({ id }).update({ state, ...moved })
    for (const [id, { state, benchListOn }] of moves.steps) {
      await m.trx('job_steps').where({ id }).update({ state, ...(benchListOn === undefined ? {} : { bench_list_on: benchListOn }), ...moved })
    }
    m.audit({
      action: 'jobs.moved', subject: 'settings:shop',
      facts: { jobs: Object.fromEntries(moves.jobs), steps: Object.fromEntries([...moves.steps].map(([id, { state }]) => [id, state])) },
    })
  })
}
