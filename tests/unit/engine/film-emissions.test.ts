import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { D } from '#shared/engine/decimal'
import type { EmissionsComponentInput } from '#shared/engine/emissions'
import { calculateEmissions, emittedVocG, hapPerKgSolids, mostThinnerL, reductionPct, rollingTwelveMonthsG, withinLimit } from '#shared/engine/emissions'
import { calculateFilm } from '#shared/engine/film'
import { decimal, refusal, thrownBy } from './builders'

describe('a film', () => {
  it('60 µm dry of 40 % at 1.02 g/mL is 150 µm wet, 153 g/m², 6.67 m²/L', () => {
    expect(calculateFilm({ densityGPerMl: '1.02', volumeSolidsPct: '40', dryUm: '60' })).toEqual({
      wetUm: '150', dryUm: '60', filmWeightGsm: '153', volumeSolidsAppliedPct: '40', spreadingRateM2PerL: '6.666666666667',
    })
  })

  it('thinned by 20 % of its volume keeps its dry film with more wet', () => {
    expect(calculateFilm({ densityGPerMl: '1', volumeSolidsPct: '60', thinnerPctByVolume: '20', dryUm: '50' })).toMatchObject({ wetUm: '100', volumeSolidsAppliedPct: '50' })
  })

  it('comes back whichever of the three it starts from', () => {
    const solids = decimal(5, 100, 1)
    fc.assert(fc.property(decimal(1, 2, 2), solids, decimal(0, 100, 0), decimal(5, 400, 1), (densityGPerMl, volumeSolidsPct, thinnerPctByVolume, dryUm) => {
      const given = { densityGPerMl, volumeSolidsPct, thinnerPctByVolume }
      const first = calculateFilm({ ...given, dryUm })
      for (const way of [{ wetUm: first.wetUm }, { filmWeightGsm: first.filmWeightGsm }]) {
        expect(new D(calculateFilm({ ...given, ...way }).dryUm).minus(dryUm).abs().lte('1e-9')).toBe(true)
      }
    }))
  })

  it('wants exactly one of the three', () => {
    const given = { densityGPerMl: '1', volumeSolidsPct: '40' }
    expect(thrownBy(() => calculateFilm(given))).toMatchObject(refusal('film-ways', 'dryUm'))
    expect(thrownBy(() => calculateFilm({ ...given, dryUm: '1', wetUm: '1' }))).toMatchObject(refusal('film-ways', 'dryUm'))
    expect(thrownBy(() => calculateFilm({ ...given, volumeSolidsPct: '0', dryUm: '1' }))).toMatchObject(refusal('too-small', 'volumeSolidsPct'))
  })
})

describe('emissions', () => {
  const base: EmissionsComponentInput = { massG: '1000', densityGPerMl: '1.25', solidsPct: '60', vocPct: '40' }
  const thinner: EmissionsComponentInput = { massG: '200', densityGPerMl: '0.8', solidsPct: '0', vocGPerL: '800' }

  it('of 1 000 g base and 200 g thinner: 600 g VOC in 1 050 mL', () => {
    expect(calculateEmissions({ components: [base, thinner] })).toEqual({
      densityGPerMl: '1.142857142857', solidsPct: '50', vocGPerL: '571.428571428571', vocLessWaterGPerL: '571.428571428571',
      kgVocPerKgSolids: '1', vocG: '600',
    })
  })

  it('count what reacts as film, not as emission', () => {
    expect(calculateEmissions({ components: [{ ...base, reactsPct: '75' }] })).toMatchObject({ vocG: '100', solidsPct: '90' })
  })

  it('less water leave water and exempt solvent out of the volume', () => {
    const water = { massG: '998', densityGPerMl: '0.998', solidsPct: '20', vocPct: '10', waterPct: '50' }
    // 99.8 g VOC in 1 000 mL, of which 500 mL are water
    expect(calculateEmissions({ components: [water] })).toMatchObject({ vocGPerL: '99.8', vocLessWaterGPerL: '199.6' })
    const exempt = { massG: '1000', densityGPerMl: '1', solidsPct: '41', vocPct: '19.5', exemptPct: '39.5' }
    // 395 g ÷ 0.79 = 500 mL
    expect(calculateEmissions({ components: [exempt] })).toMatchObject({ vocGPerL: '195', vocLessWaterGPerL: '390' })
  })

  it('of thinner alone know no solids', () => {
    expect(calculateEmissions({ components: [thinner] }).kgVocPerKgSolids).toBeNull()
  })

  it('do not average weight per cents by volume', () => {
    const two: EmissionsComponentInput[] = [
      { massG: '1000', densityGPerMl: '1', solidsPct: '0', vocPct: '10' }, { massG: '2000', densityGPerMl: '2', solidsPct: '0', vocPct: '30' },
    ]
    // a printed sheet would say (10 % + 30 %) ÷ 2 of the mean density: 300 g/L
    expect(calculateEmissions({ components: two }).vocGPerL).toBe('350')
  })

  it.each<[string, EmissionsComponentInput[], string, string]>([
    ['none', [], 'components-count', 'components'],
    ['no VOC figure', [{ ...base, vocPct: undefined }], 'voc-ways', 'components.0.vocGPerL'],
    ['two VOC figures', [{ ...base, vocGPerL: '1' }], 'voc-ways', 'components.0.vocGPerL'],
    ['more than the whole', [{ ...base, waterPct: '1' }], 'over-100-percent', 'components.0.solidsPct'],
    ['more VOC than mass', [{ ...thinner, vocGPerL: '801' }], 'over-100-percent', 'components.0.solidsPct'],
    ['only water', [{ massG: '998', densityGPerMl: '1', solidsPct: '0', vocPct: '0', waterPct: '100' }], 'only-water', 'components'],
  ])('refuse %s', (_, components, code, field) => {
    expect(thrownBy(() => calculateEmissions({ components }))).toMatchObject(refusal(code, field))
  })
})

describe('accounts', () => {
  it('emitted = mixed + cleaning − recorded waste', () => {
    expect(emittedVocG({ mixedG: '1000', cleaningG: '250', wasteG: '100.5' })).toBe('1149.5')
    expect(thrownBy(() => emittedVocG({ mixedG: '10', cleaningG: '0', wasteG: '11' }))).toMatchObject(refusal('waste-over-use', 'wasteG'))
  })

  it('roll over twelve months', () => {
    expect(rollingTwelveMonthsG(Array.from({ length: 14 }, (_, i) => String(i + 1)))).toEqual(
      ['1', '3', '6', '10', '15', '21', '28', '36', '45', '55', '66', '78', '90', '102'])
  })

  it('most thinner is rounded down, never over the limit, and one step more is over', () => {
    expect(mostThinnerL({ limitGPerL: '420', volumeL: '5', vocG: '1900', thinnerVocGPerL: '870', stepL: '0.01' })).toBe('0.44')
    const figure = decimal(300, 600, 0)
    fc.assert(fc.property(figure, decimal(1, 20, 1), decimal(100, 290, 0), decimal(700, 900, 0), (limitGPerL, volumeL, own, thinnerVocGPerL) => {
      const vocG = new D(own).times(volumeL)
      const most = new D(mostThinnerL({ limitGPerL, volumeL, vocG: vocG.toString(), thinnerVocGPerL, stepL: '0.01' })!)
      const with_ = (litres: InstanceType<typeof D>) => vocG.plus(litres.times(thinnerVocGPerL)).div(litres.plus(volumeL))
      expect(with_(most).lte(limitGPerL)).toBe(true)
      expect(with_(most.plus('0.01')).gt(limitGPerL)).toBe(true)
    }))
  })

  it('a thinner under the limit never breaks it; a mix over the limit has no room', () => {
    expect(mostThinnerL({ limitGPerL: '420', volumeL: '5', vocG: '1900', thinnerVocGPerL: '420', stepL: '0.01' })).toBeNull()
    expect(thrownBy(() => mostThinnerL({ limitGPerL: '420', volumeL: '5', vocG: '2101', thinnerVocGPerL: '870', stepL: '0.01' }))).toMatchObject(refusal('already-over-limit'))
  })

  it('pollutant a kilogram of solids, reductions and limits', () => {
    expect(hapPerKgSolids([{ solidsKg: '100', hapKgPerKgSolids: '0.8' }], [])).toBe('0.8')
    expect(thrownBy(() => hapPerKgSolids([], []))).toMatchObject(refusal('no-solids'))
    expect(reductionPct('2.5', '1')).toBe('60')
    expect([withinLimit('1.0', '1'), withinLimit('1.000001', '1')]).toEqual([true, false])
  })
})
