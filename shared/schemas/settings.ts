import * as z from 'zod/mini'
import { isZone } from '../utils/zone'

const shape = {
  name: z.string('Give the shop a name.').check(z.trim(), z.minLength(1, 'Give the shop a name.'), z.maxLength(120, 'Keep the name under 120 characters.')),
  zone: z.string('Choose the time zone.').check(z.trim(), z.maxLength(64, 'There is no such time zone.'), z.refine(zone => zone !== '' && isZone(zone), 'There is no such time zone.')),
  /** ISO 4217; null: prices stand without one. */
  currency: z.nullable(z.string().check(z.trim(), z.toUpperCase(), z.regex(/^[A-Z]{3}$/, 'Give three letters, such as EUR.'))),
}

/** What holds for the whole shop. */
export const Settings = z.object({ ...shape, version: z.number() })
export type Settings = z.infer<typeof Settings>

export const SettingsPatchBody = z.extend(z.partial(z.strictObject(shape)), { version: z.int('Send the version that was changed.') })
export type SettingsPatchBody = z.infer<typeof SettingsPatchBody>
