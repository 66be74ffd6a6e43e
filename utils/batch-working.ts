import type { Batch, BatchComponent } from '#shared/schemas/batches'
import type { WorkingLine } from '#shared/schemas/common'

/** Which figure of a component is opened. */
export type ComponentFigure = 'planned' | 'target' | 'deviation'

const startsOf: Record<ComponentFigure, readonly string[]> = {
  planned: ['exact', 'target'], target: ['target by the'], deviation: ['off the ratio'],
}

/**
 * The lines of a batch's working that made one figure of a component. The base has no target but its planned one; where
 * nothing was reckoned there are none.
 */
export function workingOf({ working }: Pick<Batch, 'working'>, component: Pick<BatchComponent, 'materialName'>, figure: ComponentFigure): WorkingLine[] {
  const own = working.filter(({ what }) => what.startsWith(`${component.materialName}, `)).map((line) => ({ line, rest: line.what.slice(component.materialName.length + 2) }))
  const pick = (kind: ComponentFigure) => own.filter(({ rest }) => (kind === 'planned' ? rest === 'exact' || rest === 'target' : startsOf[kind].some((start) => rest.startsWith(start)))).map(({ line }) => line)
  const lines = pick(figure)
  return figure === 'target' && lines.length === 0 ? pick('planned') : lines
}

/** The line that made the pot's life. */
export const lifeWorking = ({ working }: Pick<Batch, 'working'>): WorkingLine[] => working.filter(({ what }) => what.startsWith('pot life'))

/** The lines that made the totals: everything but the components' own and the pot life. */
export function totalWorking({ working, components }: Pick<Batch, 'working' | 'components'>): WorkingLine[] {
  return working.filter(({ what }) => !what.startsWith('pot life') && !components.some(({ materialName }) => what.startsWith(`${materialName}, `)))
}
