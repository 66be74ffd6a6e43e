import { describe, expect, it } from 'vitest'
import { D } from '#shared/engine/decimal'
import { previewMix, type PreviewMaterial } from '#shared/utils/mix-preview'

const material = (id: string, role: PreviewMaterial['role'], more: Partial<PreviewMaterial> = {}): [string, PreviewMaterial] => [id, {
  id, code: id.toUpperCase(), role, densityGPerMl: '1', archived: false, solidsPct: '50', reactsPct: null, vocGPerL: '500', vocPct: null, waterPct: null, exemptPct: null, ...more,
}]
const materials = new Map([
  material('base', 'base', { densityGPerMl: '1.25', solidsPct: '60', vocGPerL: '500' }),
  material('hardener', 'hardener', { solidsPct: '75', vocGPerL: '250' }),
  material('bare', 'thinner', { densityGPerMl: null, solidsPct: null }),
  material('accelerator', 'accelerator'), material('peroxide', 'peroxide'),
])
const part = (materialId: string, role: 'base' | 'hardener' | 'thinner' | 'accelerator' | 'peroxide', parts: string, tolerancePct: string | null = null) =>
  ({ materialId, role, parts, partsMax: null, tolerancePct, reactive: role === 'hardener' || role === 'peroxide' })

function made(draft: Parameters<typeof previewMix>[0]) {
  const result = previewMix(draft, materials)
  if ('fault' in result) throw new Error(result.fault.message)
  return result.preview
}

describe('previewMix', () => {
  it('weighs out a kilogram whose targets add up and whose shares follow the parts', () => {
    const { batch } = made({ basis: 'weight', components: [part('base', 'base', '100'), part('hardener', 'hardener', '25')] })
    expect(batch.components.map(({ targetG, sharePct }) => [targetG, sharePct])).toEqual([['800', '80'], ['200', '20']])
    expect(batch.targetTotalG).toBe('1000')
  })

  it('worked by hand: 800 g at 1.25 and 200 g at 1 are 840 mL, with 370 g of solvent in it', () => {
    const { densityGPerMl, emissions } = made({ basis: 'weight', components: [part('base', 'base', '100'), part('hardener', 'hardener', '25')] })
    expect(new D(densityGPerMl ?? 0).toFixed(6)).toBe('1.190476')
    expect(emissions?.vocG).toBe('370')
    expect(new D(emissions?.vocGPerL ?? 0).toFixed(4)).toBe('440.4762')
  })

  it('names the materials whose sheets say too little for emissions, and still weighs', () => {
    const preview = made({ basis: 'weight', components: [part('base', 'base', '100'), part('bare', 'thinner', '10')] })
    expect(preview.emissions).toBeNull()
    expect(preview.lacking).toEqual(['BARE'])
    expect(preview.densityGPerMl).toBeNull()
    expect(preview.batch.targetTotalG).toBe('1000')
  })

  it('puts a missing density beside the material that lacks it', () => {
    const result = previewMix({ basis: 'volume', components: [part('base', 'base', '2'), part('bare', 'thinner', '1')] }, materials)
    expect(result).toMatchObject({ fault: { path: 'components.1.materialId' } })
  })

  it('pours accelerator and peroxide apart, stirred between, whatever the order on paper', () => {
    const { order } = made({ basis: 'weight', components: [part('base', 'base', '100'), part('peroxide', 'peroxide', '2', '5'), part('accelerator', 'accelerator', '2', '5')] })
    expect(order).toEqual([0, 2, null, 1])
  })
})
