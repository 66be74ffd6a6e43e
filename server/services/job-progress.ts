import type { StepState } from '#shared/schemas/jobs'
import type { Faces } from '#shared/schemas/schedules'
import type { JobApplication } from '../repositories/jobs'

/** What a step asks of every piece. */
export interface StepAsks {
  state: StepState
  coats: number
  faces: Faces | null
}

/** Coats and faces are counted apart: a coat on both faces may be two applications. */
type Applied = Pick<JobApplication, 'coatNumber' | 'face'>

/** Whether the faces that were coated are all that the step asks for. A face that was not noted counts as all. */
export function covers(faces: readonly (Faces | null)[], asked: Faces | null): boolean {
  const on = (face: Faces): boolean => faces.includes(face) || faces.includes('all')
  const both = on('both') || (on('front') && on('back'))
  if (asked === null || faces.includes(null)) return faces.length > 0
  if (asked === 'both') return both
  if (asked === 'all') return faces.includes('all') || (both && on('edges'))
  return on(asked) || (asked !== 'edges' && on('both'))
}

/** How many coats of a step are complete on one piece. */
export function coatsDone(applied: readonly Applied[], asks: Pick<StepAsks, 'coats' | 'faces'>): number {
  const coats = new Map<number, (Faces | null)[]>()
  for (const { coatNumber, face } of applied) coats.set(coatNumber ?? 1, [...coats.get(coatNumber ?? 1) ?? [], face])
  const complete = [...coats.values()].filter(faces => covers(faces, asks.faces)).length
  return complete > asks.coats ? asks.coats : complete
}

/** Where one step stands on one piece. A step that was set as done is done on all of them. */
export function pieceStepState(applied: readonly Applied[], asks: StepAsks): StepState {
  if (asks.state === 'done' || coatsDone(applied, asks) >= asks.coats) return 'done'
  return applied.length > 0 ? 'started' : 'to-come'
}
