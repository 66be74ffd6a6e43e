import * as z from 'zod/mini'
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
