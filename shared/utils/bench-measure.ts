import * as z from 'zod/mini'
import type { BenchRun } from './bench-run'
import { CelsiusText, PercentText } from '../schemas/fields'

const orEmpty = (schema: z.ZodMiniType<string, string>) => z.union([z.literal(''), schema])

/** What can be measured of a pot before it is sprayed. Empty: not measured. */
export const MeasureForm = z.strictObject({
  cup: z.string().check(z.minLength(1, 'Choose the cup.'), z.maxLength(12)),
  seconds: orEmpty(z.string().check(z.regex(/^\d{1,4}(?:\.\d{1,2})?$/, 'Give seconds with at most two decimals.'))),
  materialC: orEmpty(CelsiusText),
  airC: orEmpty(CelsiusText),
  rhPct: orEmpty(PercentText),
  surfaceC: orEmpty(CelsiusText),
}).check(
  z.refine(({ seconds, materialC }) => materialC === '' || seconds !== '', { path: ['seconds'], error: 'Give the run-out time with the temperature.' }),
  z.refine(({ airC, rhPct }) => airC === '' || rhPct !== '', { path: ['rhPct'], error: 'Give the humidity with the air.' }),
  z.refine(({ airC, rhPct, surfaceC }) => (rhPct === '' && surfaceC === '') || airC !== '', { path: ['airC'], error: 'Give the air as well.' }),
)

type Measured = Pick<BenchRun, 'climate' | 'viscosity' | 'viscosityAt'>

/** What the form opens with. A viscosity from before the last thinner is measured anew: its figures are not put in again. */
export function measuredBefore({ viscosity, climate }: Measured, isOld: boolean, sheetCup: string | null): z.infer<typeof MeasureForm> {
  return {
    cup: viscosity?.cup ?? sheetCup ?? 'din-4',
    seconds: isOld ? '' : viscosity?.seconds ?? '',
    materialC: isOld ? '' : viscosity?.materialC ?? '',
    airC: climate?.airC ?? '',
    rhPct: climate?.rhPct ?? '',
    surfaceC: climate?.surfaceC ?? '',
  }
}

/**
 * What was measured, as it is noted. The viscosity's time is that of its reading: noting the climate later, or looking
 * at the form again, does not make an old reading new.
 *
 * @param isOld the viscosity that stands is from before the last thinner; leaving it empty leaves it standing
 * @param at ISO instant by the server's clock
 */
export function noteMeasured(before: Measured, form: z.infer<typeof MeasureForm>, isOld: boolean, at: string): Measured {
  const climate = form.airC === '' ? null : { airC: form.airC, rhPct: form.rhPct, surfaceC: form.surfaceC || null }
  if (form.seconds === '') return isOld ? { ...before, climate } : { climate, viscosity: null, viscosityAt: null }
  const viscosity = { cup: form.cup, seconds: form.seconds, materialC: form.materialC || null }
  const isSame = !isOld && before.viscosity !== null && JSON.stringify(before.viscosity) === JSON.stringify(viscosity)
  return isSame ? { climate, viscosity: before.viscosity, viscosityAt: before.viscosityAt } : { climate, viscosity, viscosityAt: at }
}
