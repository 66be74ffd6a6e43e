import { calculateBatch, type BatchAnswer } from '../engine/batch'
import { pouringOrder } from '../engine/chemistry'
import { calculateEmissions, type EmissionsAnswer } from '../engine/emissions'
import { EngineError } from '../engine/error'
import { readMix } from '../engine/mix'
import { print } from '../engine/decimal'
import { beside, mixInputOf, type Fault, type RuledMaterial, type RuledRevision } from './mix-rules'

/** A material with what its sheet says of emissions. */
export interface PreviewMaterial extends RuledMaterial {
  solidsPct: string | null
  reactsPct: string | null
  vocGPerL: string | null
  vocPct: string | null
  waterPct: string | null
  exemptPct: string | null
}

/** What a mix comes to, before it is saved. */
export interface MixPreview {
  /** One batch of `previewTotalG`, weighed to a gram. */
  batch: BatchAnswer
  /** By adding volumes; null where a density is missing. */
  densityGPerMl: string | null
  /** As applied; null where a material lacks what it needs. */
  emissions: EmissionsAnswer | null
  /** Codes of the materials that lack density, solids or solvent. */
  lacking: string[]
  /** The bench's safe order: places of components, null for stirring. */
  order: (number | null)[]
}

/** Grams of the batch that a preview weighs out. */
export const previewTotalG = '1000'

type Draft = Pick<RuledRevision, 'basis' | 'components'>

/** Works a mix out, or says beside which field it cannot be. */
export function previewMix(draft: Draft, materials: ReadonlyMap<string, PreviewMaterial>): { preview: MixPreview } | { fault: Fault } {
  try {
    const input = mixInputOf(draft, materials)
    const mix = readMix(input)
    const batch = calculateBatch({ mix: input, totalG: previewTotalG, scaleDivisionG: '1' })
    const parts = draft.components.map(({ materialId }, place) => ({ material: materials.get(materialId), massG: batch.components[place]?.exactG ?? '0' }))
    const lacking = parts.flatMap(({ material }) => material === undefined ? ['?'] : isWhole(material) ? [] : [material.code])
    return {
      preview: {
        batch,
        densityGPerMl: mix.densityGPerMl === null ? null : print(mix.densityGPerMl),
        emissions: lacking.length > 0 ? null : emissionsOf(parts),
        lacking,
        order: pouringOrder(mix).map(step => (step.kind === 'pour' ? step.index : null)),
      },
    }
  }
  catch (error) {
    if (error instanceof EngineError) return { fault: beside(error) }
    throw error
  }
}

const isWhole = ({ densityGPerMl, solidsPct, vocGPerL, vocPct }: PreviewMaterial): boolean =>
  densityGPerMl !== null && solidsPct !== null && (vocGPerL !== null || vocPct !== null)

/** Emissions of what is complete; null where the sheets' figures contradict each other. */
function emissionsOf(parts: readonly { material: PreviewMaterial | undefined, massG: string }[]): EmissionsAnswer | null {
  try {
    return calculateEmissions({
      components: parts.flatMap(({ material, massG }) => material === undefined
        ? []
        : [{
            massG, densityGPerMl: material.densityGPerMl ?? '', solidsPct: material.solidsPct ?? '', reactsPct: material.reactsPct ?? undefined,
            vocGPerL: material.vocGPerL ?? undefined, vocPct: material.vocGPerL === null ? material.vocPct ?? undefined : undefined,
            waterPct: material.waterPct ?? undefined, exemptPct: material.exemptPct ?? undefined,
          }]),
    })
  }
  catch (error) {
    if (error instanceof EngineError) return null
    throw error
  }
}
