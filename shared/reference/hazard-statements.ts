/** One sentence of a safety data sheet, word for word. */
export interface HazardStatement {
  code: string
  kind: 'H' | 'EUH' | 'P'
  text: string
}

/**
 * Sentences of Regulation (EC) No 1272/2008 (CLP), Annexes II to IV, that materials for spraying wood carry.
 * From memory, but for H225, H226, H251, H304, H315, H317, H319, H332, H334, H335, H336 (customs sampling manual of the
 * European Commission) and EUH066 (CLP Annex II 1.2.4). The material's own safety data sheet decides.
 */
const TEXTS: Readonly<Record<string, string>> = {
  H220: 'Extremely flammable gas.',
  H222: 'Extremely flammable aerosol.',
  H223: 'Flammable aerosol.',
  H224: 'Extremely flammable liquid and vapour.',
  H225: 'Highly flammable liquid and vapour.',
  H226: 'Flammable liquid and vapour.',
  H228: 'Flammable solid.',
  H229: 'Pressurised container: May burst if heated.',
  H240: 'Heating may cause an explosion.',
  H241: 'Heating may cause a fire or explosion.',
  H242: 'Heating may cause a fire.',
  H250: 'Catches fire spontaneously if exposed to air.',
  H251: 'Self-heating: may catch fire.',
  H252: 'Self-heating in large quantities; may catch fire.',
  H270: 'May cause or intensify fire; oxidiser.',
  H271: 'May cause fire or explosion; strong oxidiser.',
  H272: 'May intensify fire; oxidiser.',
  H280: 'Contains gas under pressure; may explode if heated.',
  H290: 'May be corrosive to metals.',
  H300: 'Fatal if swallowed.',
  H301: 'Toxic if swallowed.',
  H302: 'Harmful if swallowed.',
  H304: 'May be fatal if swallowed and enters airways.',
  H310: 'Fatal in contact with skin.',
  H311: 'Toxic in contact with skin.',
  H312: 'Harmful in contact with skin.',
  H314: 'Causes severe skin burns and eye damage.',
  H315: 'Causes skin irritation.',
  H317: 'May cause an allergic skin reaction.',
  H318: 'Causes serious eye damage.',
  H319: 'Causes serious eye irritation.',
  H330: 'Fatal if inhaled.',
  H331: 'Toxic if inhaled.',
  H332: 'Harmful if inhaled.',
  H334: 'May cause allergy or asthma symptoms or breathing difficulties if inhaled.',
  H335: 'May cause respiratory irritation.',
  H336: 'May cause drowsiness or dizziness.',
  H340: 'May cause genetic defects.',
  H341: 'Suspected of causing genetic defects.',
  H350: 'May cause cancer.',
  H350i: 'May cause cancer by inhalation.',
  H351: 'Suspected of causing cancer.',
  H360: 'May damage fertility or the unborn child.',
  H360D: 'May damage the unborn child.',
  H360F: 'May damage fertility.',
  H360FD: 'May damage fertility. May damage the unborn child.',
  H361: 'Suspected of damaging fertility or the unborn child.',
  H361d: 'Suspected of damaging the unborn child.',
  H361f: 'Suspected of damaging fertility.',
  H361fd: 'Suspected of damaging fertility. Suspected of damaging the unborn child.',
  H362: 'May cause harm to breast-fed children.',
  H370: 'Causes damage to organs.',
  H371: 'May cause damage to organs.',
  H372: 'Causes damage to organs through prolonged or repeated exposure.',
  H373: 'May cause damage to organs through prolonged or repeated exposure.',
  H400: 'Very toxic to aquatic life.',
  H410: 'Very toxic to aquatic life with long lasting effects.',
  H411: 'Toxic to aquatic life with long lasting effects.',
  H412: 'Harmful to aquatic life with long lasting effects.',
  H413: 'May cause long lasting harmful effects to aquatic life.',
  H420: 'Harms public health and the environment by destroying ozone in the upper atmosphere.',
  EUH018: 'In use may form flammable/explosive vapour-air mixture.',
  EUH019: 'May form explosive peroxides.',
  EUH044: 'Risk of explosion if heated under confinement.',
  EUH066: 'Repeated exposure may cause skin dryness or cracking',
  EUH071: 'Corrosive to the respiratory tract.',
  EUH201: 'Contains lead. Should not be used on surfaces liable to be chewed or sucked by children.',
  EUH202: 'Cyanoacrylate. Danger. Bonds skin and eyes in seconds. Keep out of the reach of children.',
  EUH204: 'Contains isocyanates. May produce an allergic reaction.',
  EUH205: 'Contains epoxy constituents. May produce an allergic reaction.',
  EUH208: 'Contains <name of sensitising substance>. May produce an allergic reaction.',
  EUH209: 'Can become highly flammable in use.',
  EUH209A: 'Can become flammable in use.',
  EUH210: 'Safety data sheet available on request.',
  EUH211: 'Warning! Hazardous respirable droplets may be formed when sprayed. Do not breathe spray or mist.',
  EUH212: 'Warning! Hazardous respirable dust may be formed when used. Do not breathe dust.',
  P101: 'If medical advice is needed, have product container or label at hand.',
  P102: 'Keep out of reach of children.',
  P103: 'Read carefully and follow all instructions.',
  P201: 'Obtain special instructions before use.',
  P202: 'Do not handle until all safety precautions have been read and understood.',
  P210: 'Keep away from heat, hot surfaces, sparks, open flames and other ignition sources. No smoking.',
  P211: 'Do not spray on an open flame or other ignition source.',
  P220: 'Keep away from clothing and other combustible materials.',
  P233: 'Keep container tightly closed.',
  P234: 'Keep only in original packaging.',
  P235: 'Keep cool.',
  P240: 'Ground and bond container and receiving equipment.',
  P241: 'Use explosion-proof [electrical/ventilating/lighting/...] equipment.',
  P242: 'Use non-sparking tools.',
  P243: 'Take action to prevent static discharges.',
  P260: 'Do not breathe dust/fume/gas/mist/vapours/spray.',
  P261: 'Avoid breathing dust/fume/gas/mist/vapours/spray.',
  P264: 'Wash ... thoroughly after handling.',
  P270: 'Do not eat, drink or smoke when using this product.',
  P271: 'Use only outdoors or in a well-ventilated area.',
  P272: 'Contaminated work clothing should not be allowed out of the workplace.',
  P273: 'Avoid release to the environment.',
  P280: 'Wear protective gloves/protective clothing/eye protection/face protection/hearing protection/...',
  P284: '[In case of inadequate ventilation] wear respiratory protection.',
  'P301+P310': 'IF SWALLOWED: Immediately call a POISON CENTER/doctor/...',
  'P301+P330+P331': 'IF SWALLOWED: rinse mouth. Do NOT induce vomiting.',
  'P302+P352': 'IF ON SKIN: Wash with plenty of water/...',
  'P303+P361+P353': 'IF ON SKIN (or hair): Take off immediately all contaminated clothing. Rinse skin with water [or shower].',
  'P304+P340': 'IF INHALED: Remove person to fresh air and keep comfortable for breathing.',
  'P305+P351+P338': 'IF IN EYES: Rinse cautiously with water for several minutes. Remove contact lenses, if present and easy to do. Continue rinsing.',
  'P308+P313': 'IF exposed or concerned: Get medical advice/attention.',
  P310: 'Immediately call a POISON CENTER/doctor/...',
  P312: 'Call a POISON CENTER/doctor/... if you feel unwell.',
  P314: 'Get medical advice/attention if you feel unwell.',
  P331: 'Do NOT induce vomiting.',
  'P333+P313': 'If skin irritation or rash occurs: Get medical advice/attention.',
  'P337+P313': 'If eye irritation persists: Get medical advice/attention.',
  'P342+P311': 'If experiencing respiratory symptoms: Call a POISON CENTER/doctor/...',
  'P362+P364': 'Take off contaminated clothing and wash it before reuse.',
  P363: 'Wash contaminated clothing before reuse.',
  'P370+P378': 'In case of fire: Use ... to extinguish.',
  P391: 'Collect spillage.',
  'P403+P233': 'Store in a well-ventilated place. Keep container tightly closed.',
  'P403+P235': 'Store in a well-ventilated place. Keep cool.',
  P405: 'Store locked up.',
  P410: 'Protect from sunlight.',
  'P411+P235': 'Store at temperatures not exceeding ... °C/... °F. Keep cool.',
  P420: 'Store separately.',
  P501: 'Dispose of contents/container to ...',
}

export const hazardStatements: readonly HazardStatement[] = Object.entries(TEXTS)
  .map(([code, text]) => ({ code, kind: kindOf(code), text }))

/** The sentence of a code, or null where it is not on this list. */
export function hazardText(code: string): string | null {
  return Object.hasOwn(TEXTS, code) ? TEXTS[code] ?? null : null
}

/** Label of a flammable liquid, CLP Annex I Table 2.6.2. */
export interface FlammableLiquidLabel {
  signal: 'Danger' | 'Warning'
  hazard: string
  prevention: readonly string[]
}

const PREVENTION = ['P210', 'P233', 'P240', 'P241', 'P242', 'P243', 'P280'] as const

/** By category; category 1 boils at 35 °C or below, 3 flashes from 23 to 60 °C. */
export const flammableLiquidLabels: Readonly<Record<1 | 2 | 3, FlammableLiquidLabel>> = {
  1: { signal: 'Danger', hazard: 'H224', prevention: PREVENTION },
  2: { signal: 'Danger', hazard: 'H225', prevention: PREVENTION },
  3: { signal: 'Warning', hazard: 'H226', prevention: PREVENTION },
}

function kindOf(code: string): HazardStatement['kind'] {
  if (code.startsWith('EUH')) return 'EUH'
  return code.startsWith('H') ? 'H' : 'P'
}
