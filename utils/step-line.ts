import type { ScheduleStep } from '#shared/schemas/schedules'
import type { MarkName } from '~/utils/marks'
import { grams, ratio } from '~/utils/format'
import { minutesText, spanText } from '~/utils/words'

/** The mark of a kind of step. */
export const STEP_MARKS: Record<ScheduleStep['kind'], MarkName> = {
  prepare: 'step-prep', coat: 'step-coat', sand: 'step-sand', wait: 'step-wait', inspect: 'search',
}

/** A step in one line under its title: what matters of its kind. */
export function stepLine(step: ScheduleStep): string {
  const words = step.kind === 'coat' ? coatWords(step) : otherWords(step)
  return words.flatMap(word => word ?? []).join(', ')
}

/** A film weight for the eye: `120 g/m²`, `110 to 150 g/m²` where the sheet gives a range. */
export function filmWeightText(step: ScheduleStep): string | null {
  const { filmWeightMinGsm: low, filmWeightGsm: aim, filmWeightMaxGsm: high } = step
  if (aim !== null) return `${grams(aim)} g/m²`
  return low !== null && high !== null ? `${grams(low)} to ${grams(high)} g/m²` : null
}

function coatWords(step: ScheduleStep): (string | null)[] {
  const parts = step.mix?.parts.map(({ parts, partsMax }) => partsMax === null ? parts : [parts, partsMax] as const) ?? []
  return [
    step.mix ? step.mix.code : null,
    filmWeightText(step),
    step.coats === null ? null : `${step.coats} ${step.coats === 1 ? 'coat' : 'coats'}`,
    parts.length > 0 ? ratio(parts) : null,
  ]
}

function otherWords(step: ScheduleStep): (string | null)[] {
  return [
    step.grit,
    step.flashOffMin === null ? null : `flash-off ${minutesText(step.flashOffMin)}`,
    step.dryMin === null ? null : `dry ${minutesText(step.dryMin)}${step.dryPlace ? ` in ${step.dryPlace}` : ''}`,
    spanText(step.overcoatFromMin, step.overcoatUntilMin),
    step.instructions,
  ]
}
