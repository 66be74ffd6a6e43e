import { areaOf, cutLists } from '../../../seeds/demo/cut-lists'
import { gunFor, rackPieces, type DemoJob } from '../../../seeds/demo/jobs'
import { materials } from '../../../seeds/demo/materials'
import { mixes } from '../../../seeds/demo/mixes'
import type { DemoOrder } from '../../../seeds/demo/orders'
import { boothOf, schedules } from '../../../seeds/demo/schedules'
import type { DemoShop } from '../../../seeds/demo/shop'

/** The demo's lists as a shop that is in no database; ids are the codes. */
export const paperShop = (): DemoShop => ({
  zone: 'Europe/Copenhagen', users: new Map(), booths: new Map(), guns: new Map(), scales: new Map(), schedules: new Map(),
  materials: new Map(materials.map((material) => [material.code, { id: material.code, material }])),
  mixes: new Map(mixes.map(({ code, revisions }) => {
    const revision = revisions.at(-1)
    if (!revision) throw new Error(`${code} has no revision`)
    return [code, { id: code, current: { id: code, revision } }]
  })),
})

/** The chemistry of a mix, by its base. */
export function chemistryOf(mix: string): string {
  const base = mixes.find(({ code }) => code === mix)?.revisions.at(-1)?.parts.find(({ role }) => role === 'base')
  const material = materials.find(({ code }) => code === base?.material)
  if (!material) throw new Error(`${mix} has no base`)
  return material.chemistry
}

/** A job as it would be booked in. */
export function paperJob(order: DemoOrder, code: string): DemoJob {
  const racks: DemoJob['racks'] = []
  for (const piece of rackPieces(cutLists[order.cut](order.size))) {
    const rack = (racks[piece.rack] ??= { pieceIds: [], mm2: 0 })
    rack.mm2 += areaOf(piece).mm2
  }
  const smallest = Math.min(...racks.map(({ mm2 }) => mm2))
  const steps = schedules.find((schedule) => schedule.code === order.schedule)?.revisions.at(-1)?.steps ?? []
  return {
    id: code, code, order, revisionId: order.schedule, racks, state: 'planned',
    steps: steps.map((step, position) => {
      const booth = step.mix ? boothOf(chemistryOf(step.mix)) : null
      return { id: `${code} ${position}`, position, step, booth, gun: booth && step.mix ? gunFor(booth, step.mix, smallest) : null, state: 'to-come' }
    }),
  }
}
