import type { MaterialRole } from '#shared/schemas/material-roles'

/** A material of the invented shop. Densities, solids and emissions are common practice, no source. */
export interface DemoMaterial {
  code: string
  name: string
  role: MaterialRole
  chemistry: string
  isocyanates?: boolean
  /** g/mL */
  density: string
  solidsPct: string
  volumeSolidsPct?: string
  reactsPct?: string
  vocGPerL?: string
  vocPct?: string
  waterPct?: string
  flashPointC?: string
  shelfDays: number
  pricePerKg: string
  signal?: 'Danger' | 'Warning'
  hazards: readonly string[]
  /** Whole grams. */
  reorderG: number
  /** Whole grams of one delivery. */
  deliveryG: number
}

type Own = Omit<DemoMaterial, 'chemistry' | 'hazards'> & { hazards?: readonly string[] }

/** Hazard statements of most solvent-borne materials. */
const solventBorne = ['H226', 'H336', 'EUH066']

const of = (chemistry: string, hazards: readonly string[], list: readonly Own[]): DemoMaterial[] =>
  list.map((own) => ({ ...own, chemistry, hazards: own.hazards ?? hazards }))

const isocyanateHardener = ['H226', 'H317', 'H332', 'H335', 'EUH204']

export const materials: readonly DemoMaterial[] = [
  ...of('nitrocellulose', ['H225', 'H319', 'H336', 'EUH066'], [
    { code: 'N-100', name: 'Sealer, nitrocellulose, clear', role: 'base', density: '0.94', solidsPct: '24', volumeSolidsPct: '17', vocGPerL: '714', flashPointC: '4', shelfDays: 540, pricePerKg: '5.9', signal: 'Danger', reorderG: 20000, deliveryG: 25000 },
    { code: 'N-140', name: 'Ground, nitrocellulose, dark walnut', role: 'base', density: '0.99', solidsPct: '29', volumeSolidsPct: '20', vocGPerL: '703', flashPointC: '5', shelfDays: 540, pricePerKg: '7.2', signal: 'Danger', reorderG: 5000, deliveryG: 25000 },
    { code: 'N-210', name: 'Topcoat, nitrocellulose, satin', role: 'base', density: '0.95', solidsPct: '26', volumeSolidsPct: '18', vocGPerL: '703', flashPointC: '4', shelfDays: 540, pricePerKg: '6.8', signal: 'Danger', reorderG: 15000, deliveryG: 25000 },
    { code: 'N-330', name: 'Crackle coat, ivory', role: 'base', density: '0.98', solidsPct: '22', volumeSolidsPct: '15', vocGPerL: '764', flashPointC: '3', shelfDays: 365, pricePerKg: '14.6', signal: 'Danger', reorderG: 3000, deliveryG: 10000 },
    { code: 'N-900', name: 'Thinner, nitro, medium', role: 'thinner', density: '0.85', solidsPct: '0', vocGPerL: '850', flashPointC: '2', shelfDays: 1095, pricePerKg: '2.6', signal: 'Danger', reorderG: 30000, deliveryG: 50000 },
  ]),
  ...of('polyurethane', solventBorne, [
    { code: 'U-110', name: 'Sealer, polyurethane, clear', role: 'base', density: '0.98', solidsPct: '42', volumeSolidsPct: '35', vocGPerL: '568', flashPointC: '25', shelfDays: 365, pricePerKg: '7.9', signal: 'Warning', reorderG: 25000, deliveryG: 25000 },
    { code: 'U-120', name: 'Sealer, polyurethane, white', role: 'base', density: '1.31', solidsPct: '61', volumeSolidsPct: '41', vocGPerL: '511', flashPointC: '25', shelfDays: 365, pricePerKg: '8.6', signal: 'Warning', reorderG: 40000, deliveryG: 50000 },
    { code: 'U-260', name: 'Textured coat, two-component, graphite', role: 'base', density: '1.18', solidsPct: '52', volumeSolidsPct: '38', vocGPerL: '566', flashPointC: '26', shelfDays: 365, pricePerKg: '15.2', signal: 'Warning', reorderG: 8000, deliveryG: 20000 },
    { code: 'U-510', name: 'Hardener for polyurethane sealers', role: 'hardener', isocyanates: true, density: '1.04', solidsPct: '50', volumeSolidsPct: '44', vocGPerL: '520', flashPointC: '27', shelfDays: 270, pricePerKg: '10.4', signal: 'Warning', hazards: isocyanateHardener, reorderG: 20000, deliveryG: 25000 },
    { code: 'U-530', name: 'Hardener for textured coat', role: 'hardener', isocyanates: true, density: '1.02', solidsPct: '38', volumeSolidsPct: '33', vocGPerL: '632', flashPointC: '26', shelfDays: 270, pricePerKg: '12.9', signal: 'Warning', hazards: isocyanateHardener, reorderG: 6000, deliveryG: 15000 },
    { code: 'U-900', name: 'Thinner, polyurethane, medium', role: 'thinner', density: '0.87', solidsPct: '0', vocGPerL: '870', flashPointC: '24', shelfDays: 1095, pricePerKg: '3.1', signal: 'Warning', reorderG: 25000, deliveryG: 50000 },
    { code: 'U-905', name: 'Thinner, polyurethane, slow', role: 'thinner', density: '0.89', solidsPct: '0', vocGPerL: '890', flashPointC: '38', shelfDays: 1095, pricePerKg: '3.7', signal: 'Warning', reorderG: 10000, deliveryG: 25000 },
  ]),
  ...of('acrylic', solventBorne, [
    { code: 'A-310', name: 'Topcoat, acrylic, clear matt', role: 'base', density: '0.97', solidsPct: '38', volumeSolidsPct: '32', vocGPerL: '601', flashPointC: '25', shelfDays: 365, pricePerKg: '11.8', signal: 'Warning', reorderG: 25000, deliveryG: 25000 },
    { code: 'A-320', name: 'Topcoat, acrylic, white satin', role: 'base', density: '1.27', solidsPct: '57', volumeSolidsPct: '40', vocGPerL: '546', flashPointC: '25', shelfDays: 365, pricePerKg: '12.4', signal: 'Warning', reorderG: 25000, deliveryG: 25000 },
    { code: 'A-325', name: 'Topcoat, acrylic, sage green satin', role: 'base', density: '1.22', solidsPct: '55', volumeSolidsPct: '40', vocGPerL: '549', flashPointC: '25', shelfDays: 365, pricePerKg: '13.7', signal: 'Warning', reorderG: 10000, deliveryG: 25000 },
    { code: 'A-340', name: 'Topcoat, acrylic, black full gloss', role: 'base', density: '1.05', solidsPct: '49', volumeSolidsPct: '42', vocGPerL: '536', flashPointC: '26', shelfDays: 365, pricePerKg: '14.9', signal: 'Warning', reorderG: 12000, deliveryG: 25000 },
    { code: 'A-350', name: 'Topcoat, acrylic, clear gloss, high solids', role: 'base', density: '1.01', solidsPct: '58', volumeSolidsPct: '52', vocGPerL: '424', flashPointC: '27', shelfDays: 365, pricePerKg: '16.3', signal: 'Warning', reorderG: 10000, deliveryG: 20000 },
    { code: 'A-510', name: 'Hardener, aliphatic, for acrylic topcoats', role: 'hardener', isocyanates: true, density: '1.03', solidsPct: '48', volumeSolidsPct: '42', vocGPerL: '536', flashPointC: '28', shelfDays: 270, pricePerKg: '17.2', signal: 'Warning', hazards: isocyanateHardener, reorderG: 20000, deliveryG: 25000 },
    { code: 'A-520', name: 'Hardener, aliphatic, concentrated', role: 'hardener', isocyanates: true, density: '1.11', solidsPct: '75', volumeSolidsPct: '69', vocGPerL: '278', flashPointC: '38', shelfDays: 270, pricePerKg: '24.5', signal: 'Warning', hazards: isocyanateHardener, reorderG: 3000, deliveryG: 5000 },
    { code: 'A-900', name: 'Thinner, acrylic, medium', role: 'thinner', density: '0.88', solidsPct: '0', vocGPerL: '880', flashPointC: '25', shelfDays: 1095, pricePerKg: '3.4', signal: 'Warning', reorderG: 25000, deliveryG: 50000 },
  ]),
  ...of('solvent-stain', ['H225', 'H319', 'H336'], [
    { code: 'S-410', name: 'Spray stain concentrate, smoked oak', role: 'base', density: '0.93', solidsPct: '16', volumeSolidsPct: '11', vocGPerL: '781', flashPointC: '12', shelfDays: 730, pricePerKg: '18.8', signal: 'Danger', reorderG: 2000, deliveryG: 5000 },
    { code: 'S-450', name: 'Glaze paste, umber', role: 'base', density: '1.08', solidsPct: '45', volumeSolidsPct: '33', vocGPerL: '594', flashPointC: '30', shelfDays: 730, pricePerKg: '21.5', signal: 'Warning', hazards: solventBorne, reorderG: 800, deliveryG: 2500 },
    { code: 'S-900', name: 'Thinner for stains', role: 'thinner', density: '0.82', solidsPct: '0', vocGPerL: '820', flashPointC: '12', shelfDays: 1095, pricePerKg: '3.2', signal: 'Danger', reorderG: 12000, deliveryG: 25000 },
    { code: 'S-620', name: 'Mirror-effect coat, silver', role: 'base', density: '0.91', solidsPct: '6', volumeSolidsPct: '4', vocGPerL: '855', flashPointC: '10', shelfDays: 365, pricePerKg: '64', signal: 'Danger', reorderG: 800, deliveryG: 2500 },
    { code: 'S-640', name: 'Crystallising coat, frost', role: 'base', density: '0.96', solidsPct: '18', volumeSolidsPct: '13', vocGPerL: '787', flashPointC: '9', shelfDays: 365, pricePerKg: '38', signal: 'Danger', reorderG: 1500, deliveryG: 5000 },
  ]),
  ...of('waterborne', ['EUH208', 'H412'], [
    { code: 'W-110', name: 'Sealer, waterborne, clear', role: 'base', density: '1.03', solidsPct: '33', volumeSolidsPct: '29', vocGPerL: '62', waterPct: '61', shelfDays: 365, pricePerKg: '9.3', reorderG: 20000, deliveryG: 25000 },
    { code: 'W-115', name: 'Sealer, waterborne, clear, fast', role: 'base', density: '1.03', solidsPct: '35', volumeSolidsPct: '31', vocGPerL: '58', waterPct: '59', shelfDays: 365, pricePerKg: '10.1', reorderG: 15000, deliveryG: 25000 },
    { code: 'W-230', name: 'Topcoat, waterborne, clear matt', role: 'base', density: '1.04', solidsPct: '34', volumeSolidsPct: '30', vocGPerL: '71', waterPct: '59', shelfDays: 365, pricePerKg: '12.7', reorderG: 20000, deliveryG: 25000 },
    { code: 'W-240', name: 'Topcoat, waterborne, warm white', role: 'base', density: '1.24', solidsPct: '47', volumeSolidsPct: '35', vocGPerL: '64', waterPct: '47', shelfDays: 365, pricePerKg: '13.5', reorderG: 20000, deliveryG: 25000 },
    { code: 'W-510', name: 'Hardener, water-dispersible', role: 'hardener', isocyanates: true, density: '1.12', solidsPct: '80', volumeSolidsPct: '77', vocGPerL: '224', flashPointC: '62', shelfDays: 270, pricePerKg: '26.8', signal: 'Warning', hazards: ['H317', 'H332', 'H335', 'EUH204', 'H412'], reorderG: 4000, deliveryG: 5000 },
    { code: 'W-900', name: 'Water, demineralised', role: 'thinner', density: '1', solidsPct: '0', vocGPerL: '0', waterPct: '100', shelfDays: 365, pricePerKg: '0.4', hazards: [], reorderG: 10000, deliveryG: 25000 },
  ]),
  ...of('acid-curing', ['H226', 'H317', 'H336'], [
    { code: 'C-210', name: 'Varnish, acid-curing, clear satin', role: 'base', density: '0.98', solidsPct: '44', volumeSolidsPct: '37', vocGPerL: '549', flashPointC: '25', shelfDays: 365, pricePerKg: '7.4', signal: 'Warning', reorderG: 10000, deliveryG: 25000 },
    { code: 'C-510', name: 'Hardener, acid', role: 'hardener', density: '0.97', solidsPct: '38', volumeSolidsPct: '31', vocGPerL: '601', flashPointC: '24', shelfDays: 730, pricePerKg: '6.1', signal: 'Danger', hazards: ['H226', 'H314', 'H335'], reorderG: 2000, deliveryG: 5000 },
    { code: 'C-900', name: 'Thinner, acid-curing', role: 'thinner', density: '0.84', solidsPct: '0', vocGPerL: '840', flashPointC: '24', shelfDays: 1095, pricePerKg: '2.9', signal: 'Warning', hazards: solventBorne, reorderG: 6000, deliveryG: 25000 },
  ]),
  ...of('polyester', ['H226', 'H315', 'H319', 'H332'], [
    { code: 'P-110', name: 'Ground, polyester, filling', role: 'base', density: '1.17', solidsPct: '94', volumeSolidsPct: '92', reactsPct: '32', vocGPerL: '70', flashPointC: '31', shelfDays: 180, pricePerKg: '9.6', signal: 'Warning', reorderG: 6000, deliveryG: 20000 },
    { code: 'P-610', name: 'Accelerator, cobalt', role: 'accelerator', density: '0.9', solidsPct: '12', volumeSolidsPct: '8', vocGPerL: '792', flashPointC: '28', shelfDays: 365, pricePerKg: '19.4', signal: 'Warning', hazards: ['H226', 'H317', 'H412'], reorderG: 300, deliveryG: 1000 },
    { code: 'P-710', name: 'Peroxide hardener', role: 'peroxide', density: '1.12', solidsPct: '35', volumeSolidsPct: '31', vocGPerL: '728', flashPointC: '61', shelfDays: 180, pricePerKg: '16.7', signal: 'Danger', hazards: ['H242', 'H302', 'H314'], reorderG: 300, deliveryG: 1000 },
  ]),
  ...of('polyurethane', solventBorne, [
    { code: 'U-590', name: 'Hardener, very quick, for practice', role: 'hardener', isocyanates: true, density: '1.05', solidsPct: '50', volumeSolidsPct: '44', vocGPerL: '525', flashPointC: '27', shelfDays: 270, pricePerKg: '11.2', signal: 'Warning', hazards: isocyanateHardener, reorderG: 300, deliveryG: 5000 },
  ]),
]

/** What to wear, by what a material brings along; the safety data sheet decides. */
export function protectionOf(material: DemoMaterial): { mixing: string, spraying: string } {
  const mixing = material.hazards.length === 0
    ? 'Nitrile gloves, eye protection.'
    : 'A2-P3 combined mask, nitrile gloves, eye protection, as the safety data sheet says.'
  if (material.isocyanates) return { mixing, spraying: 'Air-fed mask only; the visor stays down until the booth is cleared.' }
  return { mixing, spraying: material.hazards.length === 0 ? 'P2 mask, gloves.' : 'A2-P3 combined mask or air-fed mask, gloves, suit.' }
}
