import { describe, expect, it } from 'vitest'
import { mixFaults, type RuledMaterial, type RuledRevision } from '#shared/utils/mix-rules'

const material = (id: string, role: RuledMaterial['role'], more: Partial<RuledMaterial> = {}): [string, RuledMaterial] =>
  [id, { id, code: id.toUpperCase(), role, densityGPerMl: '1.2', archived: false, ...more }]

const materials = new Map([
  material('base', 'base'), material('hardener', 'hardener'), material('thinner', 'thinner', { densityGPerMl: null }),
  material('accelerator', 'accelerator'), material('peroxide', 'peroxide'), material('old', 'thinner', { archived: true }), material('lacquer', 'ready-to-use'),
])

type Component = RuledRevision['components'][number]
const part = (materialId: string, role: Component['role'], parts: string, more: Partial<Component> = {}): Component =>
  ({ materialId, role, parts, partsMax: null, tolerancePct: null, reactive: role === 'hardener' || role === 'peroxide', ...more })

const revision = (more: Partial<RuledRevision> = {}): RuledRevision => ({
  basis: 'weight', components: [part('base', 'base', '100'), part('hardener', 'hardener', '50'), part('thinner', 'thinner', '20', { partsMax: '30' })],
  potLifeMin: '240', potLifeReferenceC: '20', potLifeTable: null, halvesPerC: null, lateFromPct: '75', inductionMin: '10', viscosity: null, ...more,
})

const paths = (more: Partial<RuledRevision>): string[] => mixFaults(revision(more), materials).map(fault => fault.path)

describe('mixFaults', () => {
  it('is content with a mix that can be poured', () => {
    expect(mixFaults(revision(), materials)).toEqual([])
    expect(paths({ potLifeMin: null, potLifeReferenceC: null, potLifeTable: [{ c: '18', min: '300' }, { c: '25', min: '150' }] })).toEqual([])
    expect(paths({ components: [part('lacquer', 'base', '100')], potLifeMin: null, potLifeReferenceC: null })).toEqual([])
  })

  it.each<[string, Partial<RuledRevision>, string]>([
    ['a material that is not there', { components: [part('base', 'base', '100'), part('gone', 'thinner', '5')] }, 'components.1.materialId'],
    ['an archived material', { components: [part('base', 'base', '100'), part('old', 'thinner', '5')] }, 'components.1.materialId'],
    ['the same material twice', { components: [part('base', 'base', '100'), part('base', 'additive', '5')] }, 'components.1.materialId'],
    ['a peroxide called a hardener', { components: [part('base', 'base', '100'), part('peroxide', 'hardener', '2')] }, 'components.1.role'],
    ['a thinner called a peroxide', { components: [part('base', 'base', '100'), part('thinner', 'peroxide', '2', { tolerancePct: '5' })] }, 'components.1.role'],
    ['no base', { components: [part('hardener', 'hardener', '50')] }, 'components'],
    ['a density that is missing by volume', { basis: 'volume' }, 'components.2.materialId'],
    ['a range that runs backwards', { components: [part('base', 'base', '100'), part('hardener', 'hardener', '50', { partsMax: '40' })] }, 'components.1.partsMax'],
    ['a peroxide without its sheet\'s tolerance', { components: [part('base', 'base', '100'), part('peroxide', 'peroxide', '2')] }, 'components.1.tolerancePct'],
    ['a reacting mix without pot life', { potLifeMin: null, potLifeReferenceC: null }, 'potLifeMin'],
    ['a pot life that nothing starts', { components: [part('base', 'base', '100'), part('thinner', 'thinner', '20')] }, 'components'],
    ['a pot life without its temperature', { potLifeReferenceC: null }, 'potLifeReferenceC'],
    ['a value and a table at once', { potLifeTable: [{ c: '20', min: '240' }] }, 'potLifeTable'],
    ['a table that grows as it gets warmer', { potLifeMin: null, potLifeReferenceC: null, potLifeTable: [{ c: '20', min: '100' }, { c: '25', min: '120' }] }, 'potLifeTable'],
    ['a table that names a temperature twice', { potLifeMin: null, potLifeReferenceC: null, potLifeTable: [{ c: '20', min: '100' }, { c: '20', min: '90' }] }, 'potLifeTable'],
    ['a temperature no shop has', { potLifeReferenceC: '400' }, 'potLifeReferenceC'],
    ['a mix that is late before it may be sprayed', { inductionMin: '180' }, 'inductionMin'],
    ['seconds that run backwards', { viscosity: { secondsMin: '30', secondsMax: '20' } }, 'viscosity.secondsMax'],
  ])('puts %s beside its field', (_, more, path) => {
    expect(paths(more)).toEqual([path])
  })
})
