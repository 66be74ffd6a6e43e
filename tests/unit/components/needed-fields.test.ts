import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type * as z from 'zod/mini'
import { DeviceCreateBody } from '#shared/schemas/devices'
import { LotCreateBody, LotPatchBody } from '#shared/schemas/lots'
import { MaterialCreateBody } from '#shared/schemas/materials'
import { MixCreateBody } from '#shared/schemas/mixes'
import { OwnPasswordBody, PersonCreateBody } from '#shared/schemas/people'
import { SettingsPatchBody } from '#shared/schemas/settings'
import { BoothBody, GunBody, MixingCupBody, ScaleBody } from '#shared/schemas/shop-edit'

interface Shaped { shape: Record<string, z.ZodMiniType> }

/** Each form and the schema that its fields go through. A choice that always stands has nothing to leave empty. */
const FORMS: readonly [file: string, schema: Shaped][] = [
  ['components/shop/ShopBoothForm.vue', BoothBody],
  ['components/shop/ShopCupForm.vue', MixingCupBody],
  ['components/shop/ShopGunForm.vue', GunBody],
  ['components/shop/ShopScaleForm.vue', ScaleBody],
  ['components/shop/ShopPersonForm.vue', PersonCreateBody],
  ['components/shop/ShopDevices.vue', DeviceCreateBody],
  ['components/shop/ShopSettingsForm.vue', SettingsPatchBody],
  ['pages/shop/me.vue', OwnPasswordBody],
  ['components/lot/LotForm.vue', LotCreateBody],
  ['components/lot/LotFixForm.vue', LotPatchBody],
  ['components/material/MaterialForm.vue', MaterialCreateBody],
  ['components/mix/MixForm.vue', MixCreateBody],
  ['components/mix/MixLifeFields.vue', MixCreateBody],
]

/** Fields of a form that stand for one of its schema's, and whether they are marked as needed, always or at times. */
function fieldsOf(file: string): { key: string, marked: boolean }[] {
  const tags = readFileSync(file, 'utf8').match(/<BaseField\b(?:"[^"]*"|[^">])*>/g) ?? []
  return tags.flatMap((tag) => {
    const key = /:error="(?:errors\.(\w+)|fault\('(\w+)'\))/.exec(tag)
    return key === null || / group[ >]/.test(tag) ? [] : [{ key: key[1] ?? key[2] ?? '', marked: /\s:?required[\s=>]/.test(tag.replaceAll(/"[^"]*"/g, '""')) }]
  })
}

const mayBeEmpty = (field: z.ZodMiniType): boolean => field.safeParse('').success || field.safeParse(null).success

describe('a form says which of its fields are needed', () => {
  it.each(FORMS)('%s', (file, { shape }) => {
    const fields = fieldsOf(file).filter(({ key }) => shape[key] !== undefined)
    expect(fields.length).toBeGreaterThan(0)
    const unmarked = fields.filter(({ key, marked }) => !marked && !mayBeEmpty(shape[key]!))
    expect(unmarked.map(({ key }) => key)).toEqual([])
  })

  it('and of no field that may always stay empty', () => {
    const wrong = FORMS.flatMap(([file, { shape }]) => fieldsOf(file)
      .filter(({ key, marked }) => marked && shape[key] !== undefined && mayBeEmpty(shape[key])).map(({ key }) => `${file} ${key}`))
    // Needed by another answer of the same form.
    expect(wrong.filter(one => !/LotForm.vue grams|clearanceMin|verificationIntervalG|boothId|potLifeMin|potLifeReferenceC/.test(one))).toEqual([])
  })
})
