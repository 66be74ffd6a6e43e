import { calculateBatch } from '#shared/engine/batch'
import { coveredAreaM2 } from '#shared/engine/amount'
import { UNMEASURED_CLEARANCE_MS } from '#shared/engine/clearance'
import { calculateDewPoint } from '#shared/engine/climate'
import { costOf, costPerM2 } from '#shared/engine/cost'
import { D, print } from '#shared/engine/decimal'
import { calculateEmissions, hapPerKgSolids, mostThinnerL, reductionPct, withinLimit } from '#shared/engine/emissions'
import { calculateFilm } from '#shared/engine/film'
import { arrivedCoatWeightGsm, measuredEfficiency, oversprayOf } from '#shared/engine/gun'
import { convertBasis, gramsOf, readMix } from '#shared/engine/mix'
import type { MixInput } from '#shared/engine/mix'
import { calculatePotLife } from '#shared/engine/pot-life'
import { calculatePour } from '#shared/engine/pour'
import { handbook44ToleranceD, oimlMpeG } from '#shared/engine/scale'
import type { OimlClass } from '#shared/engine/scale'
import { convertUnit } from '#shared/engine/units'
import type { Unit } from '#shared/engine/units'
import { bandOf, judge } from '#shared/engine/verdict'
import { calculateViscosity, inCupRange } from '#shared/engine/viscosity'
import type { Cup } from '#shared/engine/viscosity'
import { boothFaceVelocityFtPerMin, woodFurnitureLimits } from '#shared/reference/emission-limits'
import { grainUm } from '#shared/reference/grits'
import { flammableLiquidLabels, hazardText } from '#shared/reference/hazard-statements'
import { RECORD_YEARS_ON_SITE, keepUntil } from '#shared/utils/retention'

/** Inputs of an entry as plain decimals. */
type Inputs = (name: string) => string
type Answer = Record<string, string | boolean>
type Answerer = (input: Inputs, list: (name: string) => string[]) => Answer

const ROLES = ['base', 'hardener', 'thinner'] as const

function mixOf(basis: 'weight' | 'volume', parts: string[], densities: string[] = []): MixInput {
  return {
    basis,
    components: parts.map((part, index) => ({
      name: ROLES[index] ?? 'more', parts: part, densityGPerMl: densities[index],
    })),
  }
}

/** Dry from wet and wet from dry, in any unit of length that both share. */
const film = (volumeSolidsPct: string, way: { dryUm: string } | { wetUm: string }, thinnerPctByVolume = '0') =>
  calculateFilm({ densityGPerMl: '1', volumeSolidsPct, thinnerPctByVolume, ...way })

const wetFromDry: Answerer = input => ({ WFT: film(input('VS'), { dryUm: input('DFT') }).wetUm })
const dryFromWet: Answerer = input => ({ DFT: film(input('VS'), { wetUm: input('WFT') }).dryUm })

/** `vocGPerL` carries pounds a gallon just as well: the sum does not know its unit. */
const thinned: Answerer = (input) => {
  const concentration = print(new D(input('E')).div(input('V')))
  const voc = calculateEmissions({
    components: [
      { massG: print(new D(input('V')).times(1000)), densityGPerMl: '1', solidsPct: '0', vocGPerL: concentration },
      { massG: print(new D(input('y')).times(1000)), densityGPerMl: '1', solidsPct: '0', vocGPerL: input('VOC_t') },
    ],
  }).vocGPerL
  return { VOC: voc }
}

const viscosity: Answerer = (input) => {
  const cup = input('cup').toLowerCase().replace(' mm', '').replace(' ', '-') as Cup
  return { nu: calculateViscosity({ cup, seconds: input('t') }).mm2PerS }
}

const potLife = (hours: string, referenceC: string, temperatureC: string): string => {
  const { potLifeMin } = calculatePotLife({ referenceMin: print(new D(hours).times(60)), referenceC, temperatureC })
  return print(new D(potLifeMin).div(60))
}

const rule: Answerer = input => ({ tp: potLife(input('tp_ref'), input('T_ref'), input('T')) })
const dewC: Answerer = input => ({ td: calculateDewPoint({ airC: input('t'), rhPct: input('RH') }).dewPointC })
const dewF: Answerer = input => ({
  td: convertUnit(calculateDewPoint({ airC: convertUnit(input('t'), 'degF', 'degC'), rhPct: input('RH') }).dewPointC, 'degC', 'degF'),
})
const unit = (from: Unit, to: Unit, name = 'value'): Answerer => () => ({ [name]: convertUnit('1', from, to) })
const sentence: Answerer = input => ({ text: hazardText(input('code')) ?? '' })
const grit: Answerer = input => ({ size: grainUm(input('grade')) ?? '' })

const oiml: Answerer = (input) => {
  const [e, load] = [new D(input('e')), new D(input('load'))]
  const mpe = (inService: boolean): string => print(oimlMpeG(input('class') as OimlClass, e, load, inService))
  return { n: print(load.div(e)), mpe: mpe(false), in_service: mpe(true) }
}

/** One answer for each entry that is the engine's business, by its id. */
export const answers: Record<string, Answerer> = {
  'MIX-01': (input) => {
    const [base] = readMix(mixOf('volume', [input('V')], [input('rho')])).components
    return { m: base === undefined ? '' : print(base.weightParts) }
  },
  'MIX-04': (input) => {
    const density = readMix(mixOf('volume', [input('VA'), input('VB')], [input('rhoA'), input('rhoB')])).densityGPerMl
    return { rho_mix: density === null ? '' : print(density) }
  },
  'MIX-08': (input) => {
    const mix = readMix(mixOf('weight', [input('resin'), input('hardener')]))
    return { mark: print(gramsOf(mix, mix.components[0]!, new D(input('span')))) }
  },
  'MIX-09': (input) => {
    const byWeight = readMix(mixOf('weight', [input('wA'), input('wB')], ['1', '1']))
    const [a, b] = convertBasis(byWeight, 'volume')
    return { density_ratio_B_over_A: print(b!.div(a!).times(input('vA')).div(input('vB'))) }
  },
  'MIX-19': (input, list) => {
    const { components } = calculateBatch({ mix: mixOf('weight', list('parts')), totalG: input('M'), scaleDivisionG: '1' })
    return Object.fromEntries(components.map(({ name, exactG }) => [name, exactG]))
  },
  'MIX-20': (input, list) => {
    const recipe = mixOf('volume', list('parts'), [input('rho_base'), input('rho_hard'), input('rho_thin')])
    const { components } = calculateBatch({ mix: recipe, totalG: input('M'), scaleDivisionG: '0.1' })
    const mix = readMix(recipe)
    const [base, hardener] = convertBasis(mix, 'weight')
    return {
      ...Object.fromEntries(components.map(({ name, exactG }) => [name, exactG])),
      volume: print(new D(input('M')).div(mix.densityGPerMl!)),
      hardener_phr_by_weight: print(hardener!.times(100).div(base!)),
      rho_mix: print(mix.densityGPerMl!),
    }
  },
  'MIX-21': (input, list) => {
    const pour = calculatePour({
      mix: mixOf('weight', list('parts')), scaleDivisionG: '0.1', targetTotalG: input('target_total'),
      poured: [{ index: 0, pouredG: input('base_poured') }],
    })
    return {
      hardener: pour.components[1]!.targetG,
      thinner: pour.components[2]!.targetG,
      total: pour.newTotalG,
      extra: pour.extraG,
    }
  },
  'COV-01': wetFromDry,
  'COV-02': wetFromDry,
  'COV-05': wetFromDry,
  'COV-06': (input) => {
    const wetUm = arrivedCoatWeightGsm({
      mixedG: print(new D(input('V')).times(1000)), leftoverG: '0', washedOutG: '0', transferEfficiencyPct: '100', areaM2: input('A'), coats: 1,
    })
    return { WFT: wetUm, DFT: film(input('VS'), { wetUm }).dryUm }
  },
  'COV-08': dryFromWet,
  'COV-16': (input) => {
    const { wetUm, volumeSolidsAppliedPct } = film(input('VS'), { dryUm: input('DFT') }, input('thinner_added'))
    return { WFT: wetUm, VS_thinned: volumeSolidsAppliedPct }
  },
  'COV-17': input => ({ SR: film(input('VS'), { dryUm: input('DFT') }).spreadingRateM2PerL }),
  'COV-20': (input) => {
    const { filmWeightGsm } = film(input('VS'), { dryUm: input('DFT') })
    const { sprayedG } = calculateBatch({
      mix: mixOf('weight', ['1']), areaM2: input('A'), filmWeightGsm, filmWeightIs: 'deposited', coats: 1,
      transferEfficiencyPct: print(new D(1).minus(input('loss')).times(100)), scaleDivisionG: '1',
    })
    return { V: convertUnit(sprayedG, 'mL', 'L') }
  },
  'COV-23': () => {
    const mL = new D(convertUnit('1', 'gal-us', 'mL'))
    return { k: print(mL.div(convertUnit('1', 'ft2', 'm2')).div(convertUnit('1', 'mil', 'um'))) }
  },
  'COV-26': (input) => {
    const dryUm = convertUnit(input('DFT'), 'mil', 'um')
    const areaM2 = coveredAreaM2({
      totalG: convertUnit(input('G'), 'gal-us', 'mL'),
      filmWeightGsm: film(print(new D(input('VS')).times(100)), { dryUm }).filmWeightGsm,
      filmWeightIs: 'deposited',
      transferEfficiencyPct: print(new D(input('TE')).times(100)),
    })
    return { A: convertUnit(areaM2, 'm2', 'ft2') }
  },
  'COV-35': (input) => {
    const { dryUm } = film(input('VS'), { wetUm: convertUnit(input('WFT'), 'mil', 'um') })
    return { DFT: convertUnit(dryUm, 'um', 'mil') }
  },
  'COV-38': input => ({
    WFT: calculateFilm({ densityGPerMl: input('rho'), volumeSolidsPct: '40', filmWeightGsm: input('coverage') }).wetUm,
  }),
  'COV-39': (input) => {
    const { wetUm, filmWeightGsm } = calculateFilm({ densityGPerMl: input('rho'), volumeSolidsPct: input('VS'), dryUm: input('DFT') })
    const batch = calculateBatch({
      mix: mixOf('weight', ['1']), areaM2: input('A'), filmWeightGsm, filmWeightIs: 'deposited', coats: 1,
      transferEfficiencyPct: print(new D(input('TE')).times(100)), scaleDivisionG: '0.1',
    })
    return { WFT: wetUm, on_panel: filmWeightGsm, net: batch.depositedG ?? '', batch: batch.exactTotalG }
  },
  'TE-01': (input) => {
    const transferEfficiencyPct = print(new D(input('TE')).times(100))
    const { sprayedG } = calculateBatch({
      mix: mixOf('weight', ['1']), areaM2: '1', filmWeightGsm: input('on_part'), filmWeightIs: 'deposited', coats: 1,
      transferEfficiencyPct, scaleDivisionG: '1',
    })
    return { used: sprayedG, wasted: oversprayOf(sprayedG, transferEfficiencyPct) }
  },
  'TE-02': input => ({ waste: oversprayOf(input('spend'), print(new D(input('TE')).times(100))) }),
  'TE-05': (input) => {
    const { transferEfficiencyPct } = measuredEfficiency({
      gainG: input('gain'), usedG: input('liquid_used'), solidsPct: print(new D(input('NV')).times(100)),
    })
    return { TE: print(new D(transferEfficiencyPct).div(100)) }
  },
  'VOC-01': input => ({
    VOC: calculateEmissions({
      components: ['1', '2'].map(i => ({
        massG: print(new D(input(`V${i}`)).times(1000)), densityGPerMl: '1', solidsPct: '0', vocGPerL: input(`VOC${i}`),
      })),
    }).vocGPerL,
  }),
  'VOC-02': input => ({
    VOC: calculateEmissions({
      components: [{
        massG: print(new D(input('V')).times(1000)), densityGPerMl: '1', solidsPct: '0', vocPct: print(new D(input('E')).div(input('V')).div(10)),
      }],
    }).vocGPerL,
  }),
  'VOC-03': (input) => {
    const stepL = '0.01'
    const back = mostThinnerL({ limitGPerL: '3.34', volumeL: input('V'), vocG: input('E'), thinnerVocGPerL: input('VOC_t'), stepL })
    return { ...thinned(input, () => []), ...(back !== null && new D(back).gte(input('y')) ? {} : { VOC: 'thinner refused' }) }
  },
  'VOC-04': thinned,
  'VOC-08': (input) => {
    const pct = (name: string): string => print(new D(input(name)).times(100))
    const answer = calculateEmissions({
      components: [{
        massG: '1000', densityGPerMl: input('Dc'), solidsPct: pct('NV'), waterPct: pct('Ww'),
        vocPct: print(new D(100).minus(pct('NV')).minus(pct('Ww'))),
      }],
      waterDensityGPerMl: input('Dw'),
    })
    return { VOC_actual: print(new D(answer.vocGPerL).div(1000)), VOC_less_water: print(new D(answer.vocLessWaterGPerL).div(1000)) }
  },
  'VOC-10': unit('lb/gal-us', 'g/L', 'c'),
  'VOC-13': (input) => {
    const average = hapPerKgSolids(
      ['1', '2'].map(i => ({ solidsKg: input(`Mc${i}`), hapKgPerKgSolids: input(`Cc${i}`) })),
      [{ massKg: input('S1'), hapShare: input('W1') }],
    )
    return { 'E': average, 'complies_1.0': withinLimit(average, '1.0') }
  },
  'VOC-14': input => ({ R: reductionPct(input('Ebc'), input('Eac')) }),
  'VOC-15': () => ({
    limit: woodFurnitureLimits.existing.kgPerKgSolids,
    thinner_max: woodFurnitureLimits.existing.thinnerMaxPct,
    onsite_mix_thinner_max: woodFurnitureLimits.existing.onSiteMixThinnerMaxPct,
  }),
  ...Object.fromEntries(
    ['01', '03', '05', '08', '10', '13', '15', '17', '19', '31', '32'].map(n => [`VIS-${n}`, viscosity]),
  ),
  'VIS-28': input => ({ in_range: inCupRange('ford-1', input('t')) }),
  'VIS-36': input => ({ nu: calculateViscosity({ cup: 'din-4', seconds: input('t') }).mm2PerS }),
  'POT-01': rule,
  'POT-04': rule,
  'POT-07': (input) => {
    const [from, to] = [convertUnit(input('T_room'), 'degF', 'degC'), convertUnit(input('T'), 'degF', 'degC')]
    // What the print implies, for comparison: the factor for 10 K between its own two figures.
    const implied = D.pow(new D(input('tp_room')).div(6), new D(10).div(new D(to).minus(from)))
    return { tp_rule: potLife(input('tp_room'), from, to), implied_Q10: print(implied) }
  },
  'POT-10': (input) => {
    const referenceMin = print(new D(input('pot_life')).times(60))
    const { lateAfterMin } = calculatePotLife({ referenceMin, referenceC: '20', temperatureC: '20' })
    return { share: print(new D(lateAfterMin).div(referenceMin)) }
  },
  'POT-12': (input) => {
    const { lateAfterMin, usableMin } = calculatePotLife({
      referenceMin: print(new D(input('batch_limit')).times(60)), referenceC: '20', temperatureC: '20', inductionMin: input('stand'),
    })
    return { earliest_use: print(new D(lateAfterMin).minus(usableMin)) }
  },
  'DEW-01': dewC,
  'DEW-03': dewC,
  'DEW-06': dewC,
  'DEW-08': dewF,
  'DEW-09': dewF,
  'DEW-14': (input) => {
    const { dewPointC, marginC, ok } = calculateDewPoint({ airC: input('t'), rhPct: input('RH'), surfaceC: input('surface') })
    return { td: dewPointC, margin: marginC ?? '', ok_3K: ok ?? true }
  },
  'UNIT-01': unit('gal-us', 'L'),
  'UNIT-02': unit('gal-imp', 'L'),
  'UNIT-03': unit('fl-oz-us', 'mL'),
  'UNIT-04': unit('lb', 'g'),
  'UNIT-05': unit('oz', 'g'),
  'UNIT-06': unit('ft2', 'm2'),
  'UNIT-07': unit('mil', 'um'),
  'UNIT-08': unit('lb/gal-us', 'g/L'),
  'SCL-01': oiml,
  'SCL-04': oiml,
  'SCL-07': input => ({ tol: print(handbook44ToleranceD(new D(input('load')), false)) }),
  'SCL-11': (input) => {
    const divisions = new D(input('load')).div(input('d'))
    return { n: print(divisions), tol: print(handbook44ToleranceD(divisions, true).times(input('d'))) }
  },
  'SCL-14': (input) => {
    const target = new D(input('target'))
    const u = new D(input('mpe')).plus(new D(input('d')).div(2))
    const band = bandOf(target, new D(input('tol_pct')))
    return {
      tol: print(band.highG.minus(target)),
      u: print(u),
      verdict: judge(new D(input('reading')), band, u).replace('-', ' '),
    }
  },
  ...Object.fromEntries(Array.from({ length: 13 }, (_, i) => [`SAF-${String(i + 1).padStart(2, '0')}`, sentence])),
  'SAF-14': (input) => {
    const { signal, hazard, prevention } = flammableLiquidLabels[Number(input('category')) as 1 | 2 | 3]
    return { signal, H: hazard, P_prevention: prevention.join(' ') }
  },
  'SAF-15': () => ({ v_SI: convertUnit(boothFaceVelocityFtPerMin.manual, 'ft/min', 'm/s') }),
  'SAF-16': () => ({ wait: print(new D(UNMEASURED_CLEARANCE_MS).div(60_000)) }),
  'REC-01': input => ({
    keep_until: keepUntil(input('record_date')), on_site_until: keepUntil(input('record_date'), RECORD_YEARS_ON_SITE),
  }),
  'REC-02': input => ({ keep_until: keepUntil(input('record_date')) }),
  ...Object.fromEntries(['04', '06', '09', '11', '13'].map(n => [`GRIT-${n}`, grit])),
  'COST-01': (input, list) => {
    const lines = list('mass').map((grams, index) => ({ grams, pricePerKg: list('price')[index] ?? '' }))
    return { batch_cost: costOf(lines), per_m2: costPerM2(lines, input('A')) }
  },
}
