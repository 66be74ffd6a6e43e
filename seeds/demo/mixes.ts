import type { ComponentRole } from '#shared/schemas/material-roles'

interface DemoPart {
  material: string
  role: ComponentRole
  parts: string
  /** Upper end where viscosity decides. */
  partsMax?: string
  tolerancePct?: string
  reactive?: boolean
}

export interface DemoRevision {
  parts: readonly DemoPart[]
  /** Minutes at 20 °C, or a table by temperature; neither: nothing reacts. */
  potLifeMin?: string
  potLifeTable?: readonly { c: string, min: string }[]
  inductionMin?: string
  viscosity?: { cup: string, from: string, to: string }
  leftoverSharePct?: string
  notes?: string
}

/** A mix of the invented shop. Ratios and pot lives are common practice, no source. */
export interface DemoMix {
  code: string
  name: string
  /** Oldest first; the last is in force. */
  revisions: readonly DemoRevision[]
}

const base = (material: string, parts = '100'): DemoPart => ({ material, role: 'base', parts })
const hardener = (material: string, parts: string): DemoPart => ({ material, role: 'hardener', parts, reactive: true })
const thinner = (material: string, parts: string, partsMax?: string): DemoPart => ({ material, role: 'thinner', parts, ...(partsMax ? { partsMax } : {}) })

const one = (code: string, name: string, revision: DemoRevision): DemoMix => ({ code, name, revisions: [revision] })
const din = (from: string, to: string) => ({ cup: 'din-4', from, to })

/** The mix that newcomers try the bell with; no work was ever done with it. */
export const practiceMix = 'XP-50'

export const mixes: readonly DemoMix[] = [
  one('NS-40', 'Nitro sealer, clear', { parts: [base('N-100'), thinner('N-900', '40', '50')], viscosity: din('16', '19') }),
  one('NG-40', 'Nitro ground, dark walnut', { parts: [base('N-140'), thinner('N-900', '40')], viscosity: din('16', '19') }),
  one('NT-50', 'Nitro topcoat, satin', { parts: [base('N-210'), thinner('N-900', '50', '60')], viscosity: din('15', '18') }),
  one('NC-15', 'Crackle coat, ivory', { parts: [base('N-330'), thinner('N-900', '15')], viscosity: din('20', '24'), notes: 'Cracks wider where it lies thicker; no draught until it has opened.' }),
  one('US-40', 'Polyurethane sealer, clear', {
    parts: [base('U-110'), hardener('U-510', '40'), thinner('U-900', '30')],
    potLifeMin: '120', viscosity: din('18', '22'), leftoverSharePct: '10',
  }),
  {
    code: 'US-50', name: 'Polyurethane sealer, white',
    revisions: [
      { parts: [base('U-120'), hardener('U-510', '50'), thinner('U-900', '20')], potLifeMin: '120', viscosity: din('22', '26') },
      {
        parts: [base('U-120'), hardener('U-510', '50'), thinner('U-900', '30')],
        potLifeTable: [{ c: '15', min: '165' }, { c: '20', min: '120' }, { c: '25', min: '85' }, { c: '30', min: '60' }],
        viscosity: din('18', '22'), leftoverSharePct: '10', notes: 'Thinner raised from 20 to 30 parts: less orange peel on fronts.',
      },
    ],
  },
  one('AM-30', 'Acrylic topcoat, clear matt', {
    parts: [base('A-310'), hardener('A-510', '30'), thinner('A-900', '30')],
    potLifeMin: '180', viscosity: din('17', '20'), leftoverSharePct: '10',
  }),
  one('AG-80', 'Acrylic topcoat, black full gloss', {
    parts: [base('A-340'), hardener('A-510', '80'), thinner('A-900', '40')],
    potLifeMin: '150', inductionMin: '10', viscosity: din('18', '21'),
  }),
  one('AW-80', 'Acrylic topcoat, white satin', {
    parts: [base('A-320'), hardener('A-510', '80'), thinner('A-900', '30')],
    potLifeTable: [{ c: '18', min: '210' }, { c: '20', min: '180' }, { c: '25', min: '130' }],
    viscosity: din('18', '22'), leftoverSharePct: '10',
  }),
  one('AS-10', 'Acrylic topcoat, sage green satin', {
    parts: [base('A-325'), hardener('A-520', '10'), thinner('A-900', '30')],
    potLifeMin: '240', viscosity: din('19', '22'),
  }),
  one('AC-10', 'Acrylic topcoat, clear gloss', {
    parts: [base('A-350'), hardener('A-520', '10'), thinner('A-900', '40')],
    potLifeMin: '240', viscosity: din('17', '20'),
  }),
  one('ST-600', 'Spray stain, smoked oak', { parts: [base('S-410'), thinner('S-900', '600')], notes: 'Stir before every filling; the colour settles.' }),
  one('GL-300', 'Glaze, umber', { parts: [base('S-450', '10'), thinner('S-900', '300')] }),
  one('TX-100', 'Textured coat, graphite', {
    parts: [base('U-260'), hardener('U-530', '100')],
    potLifeMin: '120', notes: 'At most 1 bar: more pressure flattens the texture.',
  }),
  one('WS-5', 'Waterborne sealer, clear, fast', { parts: [base('W-115'), thinner('W-900', '5', '10')], viscosity: din('25', '35') }),
  one('WS-10', 'Waterborne sealer, clear, two-component', {
    parts: [base('W-110'), hardener('W-510', '10'), thinner('W-900', '10')],
    potLifeMin: '180', viscosity: din('24', '30'), leftoverSharePct: '0',
  }),
  one('WT-10', 'Waterborne topcoat, clear matt', {
    parts: [base('W-230'), hardener('W-510', '10'), thinner('W-900', '10', '15')],
    potLifeMin: '210', viscosity: din('25', '30'), leftoverSharePct: '0',
  }),
  one('WW-10', 'Waterborne topcoat, warm white', {
    parts: [base('W-240'), hardener('W-510', '10'), thinner('W-900', '10', '15')],
    potLifeMin: '210', viscosity: din('26', '32'), leftoverSharePct: '0',
  }),
  one('MI-0', 'Mirror-effect coat, silver', { parts: [base('S-620')], notes: 'Thin mist passes from a hand further away; never wet.' }),
  one('CR-10', 'Crystallising coat, frost', { parts: [base('S-640'), thinner('S-900', '10')] }),
  one('CV-10', 'Acid-curing varnish, clear satin', {
    parts: [base('C-210'), hardener('C-510', '10'), thinner('C-900', '20')],
    potLifeMin: '240', viscosity: din('20', '24'),
  }),
  one('CV-5', 'Acid-curing varnish, clear satin, slow', {
    parts: [base('C-210'), hardener('C-510', '5'), thinner('C-900', '20')],
    potLifeMin: '4320', viscosity: din('20', '24'), notes: 'For samples: may stand three days, cooler than 20 °C.',
  }),
  one('PG-2', 'Polyester ground, filling', {
    parts: [
      base('P-110'),
      { material: 'P-610', role: 'accelerator', parts: '2', tolerancePct: '5' },
      { material: 'P-710', role: 'peroxide', parts: '2', tolerancePct: '5', reactive: true },
    ],
    potLifeMin: '25', notes: 'Accelerator into the base, stir, then the peroxide; never one into the other.',
  }),
  one(practiceMix, 'Practice mix, its bell rings after 3 minutes', {
    parts: [base('U-110'), hardener('U-590', '50')],
    potLifeMin: '3', notes: 'For trying out the bench and the bell; not for work.',
  }),
]
