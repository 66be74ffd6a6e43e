import { planBatch } from '#shared/engine/batch'
import type { MixInput } from '#shared/engine/mix'
import { calculatePotLife } from '#shared/engine/pot-life'
import type { DraftInput } from '#shared/schemas/drafts'
import type { DemoRevision } from './mixes'
import { scales, type ScaleKey } from './places'
import type { Random } from './random'
import { the, type DemoShop } from './shop'
import { gramsOf, nearest, tenthsOf, type Tenths } from './weights'

/** What goes wrong with a pot on purpose, so that the log has something to tell. */
export const deviations = ['hardener-short', 'over-pour', 'late', 'thinner-much', 'past-life', 'stopped'] as const
export type Deviation = (typeof deviations)[number]

/** One weighing into the cup. `round` 1: added by a correction. */
export interface Weighing {
  index: number
  tenths: Tenths
  round: number
}

export interface PouredPot {
  weighings: Weighing[]
  correction: Omit<NonNullable<DraftInput['corrections']>[number], 'at'> | null
}

/** The mix as the arithmetic takes it. */
export function mixInputOf(shop: DemoShop, revision: DemoRevision): MixInput {
  return {
    basis: 'weight',
    components: revision.parts.map((part) => ({
      name: the(shop.materials, part.material).material.name, parts: part.parts, partsMax: part.partsMax, role: part.role,
      tolerancePct: part.tolerancePct, reactive: part.reactive, densityGPerMl: the(shop.materials, part.material).material.density,
    })),
  }
}

/** The plan of a pot and the scale that can carry it. */
export function planPot(shop: DemoShop, revision: DemoRevision, amount: Omit<DraftInput['plan'], 'scaleDivisionG'>): {
  plan: DraftInput['plan'], scale: ScaleKey, targets: Tenths[]
} {
  const of = (key: ScaleKey) => {
    const scale = scales.find((one) => one.key === key)
    if (!scale) throw new Error(`no scale ${key}`)
    const plan = { ...amount, scaleDivisionG: scale.division, ...(scale.mpe ? { scaleMpeG: scale.mpe } : {}) }
    const { targetTotalG, components } = planBatch({ ...plan, mix: mixInputOf(shop, revision) })
    return { plan, scale: key, total: tenthsOf(targetTotalG), targets: components.map(({ targetG }) => tenthsOf(targetG)), capacity: tenthsOf(scale.capacity) }
  }
  const fine = of('fine')
  // A correction may still add a tenth.
  return fine.total * 11 <= fine.capacity * 10 ? fine : of('coarse')
}

/** Parts per thousand by which a careful hand misses its target, well inside the tolerance. */
const scatter = { base: 6, hardener: 11, thinner: 18, additive: 18, accelerator: 14, peroxide: 14 } as const

/** Pours a pot after its targets, with a hand's natural scatter and what goes wrong on purpose. */
export function pourPot(revision: DemoRevision, targets: readonly Tenths[], scale: ScaleKey, random: Random, deviation: Deviation | null): PouredPot {
  const step = scale === 'fine' ? 1 : 10
  const parts = revision.parts.map(({ parts: text }) => parseInt(text, 10))
  const missed = (target: Tenths, thousandths: number) => Math.max(step, nearest(target * (1000 + thousandths), 1000, step))
  const poured: Tenths[] = []
  for (const [index, part] of revision.parts.entries()) {
    const follows = index === 0 ? targets[0] ?? 0 : nearest((poured[0] ?? 0) * (parts[index] ?? 0), parts[0] ?? 1, step)
    const most = scatter[part.role]
    poured.push(missed(follows, deliberate(part.role, deviation, random) ?? random.around(-most, most)))
  }
  const weighings = poured.map((tenths, index) => ({ index, tenths, round: 0 }))
  if (deviation === 'stopped') return { weighings: weighings.slice(0, 2), correction: null }
  if (deviation === 'over-pour') return corrected(poured, parts, step)
  if (deviation === 'thinner-much') return kept(weighings, poured, parts, step)
  return { weighings, correction: null }
}

/** Parts per thousand that a deviation asks for, or null where the hand's scatter counts. */
function deliberate(role: DemoRevision['parts'][number]['role'], deviation: Deviation | null, random: Random): number | null {
  if (role === 'hardener' && deviation === 'hardener-short') return random.between(-68, -53)
  if (role === 'hardener' && deviation === 'over-pour') return random.between(48, 66)
  if (role === 'thinner' && deviation === 'thinner-much') return random.between(95, 130)
  return null
}

/** The others grow to meet the hardener that was too much: base first, then what was not poured yet in full. */
function corrected(poured: readonly Tenths[], parts: readonly number[], step: Tenths): PouredPot {
  const hardener = poured[1] ?? 0
  const grown = parts.map((part) => nearest(hardener * part, parts[1] ?? 1, step))
  const first = [{ index: 0, tenths: poured[0] ?? 0, round: 0 }, { index: 1, tenths: hardener, round: 0 }]
  const base = { index: 0, tenths: (grown[0] ?? 0) - (poured[0] ?? 0), round: 1 }
  const rest = grown.slice(2).map((tenths, offset) => ({ index: offset + 2, tenths, round: 0 }))
  return {
    weighings: [...first, base, ...rest],
    correction: { cause: 'reactive-too-much', accepted: true, newTargets: grown.map(gramsOf), reason: null },
  }
}

/** Too much thinner, kept as poured. */
function kept(weighings: Weighing[], poured: readonly Tenths[], parts: readonly number[], step: Tenths): PouredPot {
  const thinner = poured.at(-1) ?? 0
  const grown = parts.map((part) => nearest(thinner * part, parts.at(-1) ?? 1, step))
  return {
    weighings,
    correction: { cause: 'thinner-too-much', accepted: false, newTargets: grown.map(gramsOf), reason: 'Runs well on the sheet, kept as poured.' },
  }
}

/** Whether a deviation can happen to a mix at all. */
export function suits(revision: DemoRevision, deviation: Deviation): boolean {
  const reacts = revision.parts[1]?.role === 'hardener'
  const last = revision.parts.at(-1)
  if (deviation === 'thinner-much') return last?.role === 'thinner' && last.partsMax === undefined && revision.parts.length > 2
  return reacts && (deviation !== 'over-pour' || revision.parts.length > 2)
}

/** Minutes of a pot's life at a temperature, in whole minutes rounded down; null where nothing reacts. */
export function potLifeOf(revision: DemoRevision, temperatureC: string): { lifeMin: number, lateMin: number } | null {
  const { potLifeMin, potLifeTable, inductionMin } = revision
  if (potLifeMin === undefined && potLifeTable === undefined) return null
  const answer = calculatePotLife({
    ...(potLifeTable ? { table: potLifeTable } : { referenceMin: potLifeMin, referenceC: '20' }), temperatureC, inductionMin: inductionMin ?? '0',
  })
  return { lifeMin: parseInt(answer.potLifeMin, 10), lateMin: parseInt(answer.lateAfterMin, 10) }
}
