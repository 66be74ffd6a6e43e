import { HUNDRED, readDecimal, readPositive } from './decimal'
import { EngineError } from './error'
import type { Mix, MixComponent } from './mix'

/** One thing to do at the bench. */
export type PouringStep = { kind: 'pour', index: number } | { kind: 'stir' }

/**
 * Order at the bench: base; accelerator into the base, stirred; the others as the mix lists them; peroxide last, after
 * stirring. Accelerator and peroxide are never neighbours.
 */
export function pouringOrder(mix: Mix): PouringStep[] {
  const pours = (wanted: (component: MixComponent) => boolean): PouringStep[] =>
    mix.components.filter(wanted).map(({ index }) => ({ kind: 'pour', index }))
  const stir: PouringStep = { kind: 'stir' }
  const accelerator = pours(({ role }) => role === 'accelerator')
  const peroxide = pours(({ role }) => role === 'peroxide')
  const others = pours(({ role }) => role !== 'base' && role !== 'accelerator' && role !== 'peroxide')
  const before: PouringStep[] = [
    ...pours(({ role }) => role === 'base'),
    ...(accelerator.length > 0 ? [...accelerator, stir] : []),
    ...others,
  ]
  if (peroxide.length === 0) return before
  return before.at(-1)?.kind === 'stir' ? [...before, ...peroxide] : [...before, stir, ...peroxide]
}

/**
 * Refuses an order in which accelerator and peroxide meet without stirring between them.
 * @throws EngineError `accelerator-meets-peroxide`, `component-unknown`
 */
export function checkPouringOrder(mix: Mix, steps: readonly PouringStep[]): void {
  steps.forEach((step, position) => {
    const next = steps[position + 1]
    if (step.kind !== 'pour' || next?.kind !== 'pour') return
    const roles = [roleAt(mix, step.index, position), roleAt(mix, next.index, position + 1)]
    if (roles.includes('accelerator') && roles.includes('peroxide')) {
      throw new EngineError('accelerator-meets-peroxide', `steps.${position + 1}`, 'Stir the accelerator into the base before the peroxide goes in')
    }
  })
}

/**
 * Whether an addition lies within its sheet's per-cent limits on the base.
 * @throws EngineError for numbers that cannot be true
 */
export function additionVerdict(input: {
  baseG: string
  addedG: string
  minPct: string
  maxPct: string
}): 'below' | 'within' | 'above' {
  const percent = readPositive(input.addedG, 'addedG').times(HUNDRED).div(readPositive(input.baseG, 'baseG'))
  if (percent.lt(readDecimal(input.minPct, 'minPct', { min: '0', max: HUNDRED }))) return 'below'
  return percent.gt(readDecimal(input.maxPct, 'maxPct', { min: '0', max: HUNDRED })) ? 'above' : 'within'
}

function roleAt(mix: Mix, index: number, position: number): MixComponent['role'] {
  const component = mix.components[index]
  if (component === undefined) {
    throw new EngineError('component-unknown', `steps.${position}`, 'The mix has no such component')
  }
  return component.role
}
