import fc from 'fast-check'
import { D } from '#shared/engine/decimal'
import type { MixComponentInput, MixInput, Role } from '#shared/engine/mix'

/** A mix by weight from its parts; names are positions unless given. */
export function byWeight(parts: readonly string[], more: readonly Partial<MixComponentInput>[] = []): MixInput {
  return { basis: 'weight', components: parts.map((part, index) => ({ name: `c${index}`, parts: part, ...more[index] })) }
}

/** Matches the engine's refusal by code and, where given, field. */
export function refusal(code: string, field?: string): object {
  return { name: 'EngineError', code, ...(field === undefined ? {} : { field }) }
}

/** What a call throws; fails where it does not. */
export function thrownBy(call: () => unknown): unknown {
  try {
    call()
  }
  catch (error) {
    return error
  }
  throw new Error('Nothing was thrown')
}

/** A plain decimal from `from` to `to` with so many decimals. */
export function decimal(from: number, to: number, decimals: number): fc.Arbitrary<string> {
  const factor = 10 ** decimals
  return fc.integer({ min: from * factor, max: to * factor }).map(n => new D(n).div(factor).toString())
}

const rolesAfterBase: Role[] = ['hardener', 'thinner', 'additive', 'accelerator']

function component(role: Role): fc.Arbitrary<MixComponentInput> {
  return fc.record({
    name: fc.constant<string>(role),
    role: fc.constant(role),
    parts: decimal(1, 700, 1),
    densityGPerMl: decimal(1, 2, 2),
    tolerancePct: decimal(1, 10, 1),
  })
}

/** Mixes of 1 to 6 components, base first, every density known. */
export const anyMix: fc.Arbitrary<MixInput> = fc.record({
  basis: fc.constantFrom('weight' as const, 'volume' as const),
  components: fc.tuple(
    component('base'),
    fc.array(fc.constantFrom(...rolesAfterBase).chain(component), { maxLength: 5 }),
  ).map(([base, rest]) => [base, ...rest]),
})

/** Mixes that react: base and hardener, perhaps a thinner. */
export const reactingMix: fc.Arbitrary<MixInput> = fc.record({
  basis: fc.constant('weight' as const),
  components: fc.tuple(component('base'), component('hardener'), fc.option(component('thinner'), { nil: undefined }))
    .map(([base, hardener, thinner]) => [base, hardener, ...(thinner === undefined ? [] : [thinner])]),
})

export const division: fc.Arbitrary<string> = fc.constantFrom('0.01', '0.1', '0.2', '0.5', '1', '2', '5')
