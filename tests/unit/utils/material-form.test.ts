import { safeParse } from 'zod/mini'
import { describe, expect, it } from 'vitest'
import { MaterialCreateBody, MaterialPatchBody } from '#shared/schemas/materials'
import { materialBody, materialValues } from '~/utils/material-form'

const typed = { ...materialValues(), code: 'B-1', name: 'Base', role: 'base', chemistry: 'polyurethane', densityGPerMl: '1.25', shelfLifeDays: '365' }

describe('the form of a material', () => {
  it('sends a new one without a version, as its schema takes it', () => {
    expect(safeParse(MaterialCreateBody, materialBody(typed)).data).toMatchObject({ code: 'B-1', densityGPerMl: '1.25', shelfLifeDays: 365, supplier: null })
  })

  it('sends a changed one with the version that it was read with', () => {
    expect(safeParse(MaterialPatchBody, materialBody({ ...typed, version: 3 })).data).toMatchObject({ code: 'B-1', version: 3 })
  })

  it('leaves what is no number of days to the schema, which refuses it beside its field', () => {
    const { error } = safeParse(MaterialCreateBody, materialBody({ ...typed, shelfLifeDays: 'a year' }))
    expect(error?.issues.map(({ path }) => path)).toEqual([['shelfLifeDays']])
  })
})
