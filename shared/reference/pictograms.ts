/** The diamonds of the Globally Harmonised System that a mixing cup can need. */
export type Pictogram = 'explosive' | 'flame' | 'oxidiser' | 'gas' | 'corrosion' | 'skull' | 'exclamation' | 'health' | 'environment'

/**
 * Which statements a diamond stands for: Regulation (EC) No 1272/2008 (CLP), Annex V. From memory; the material's own
 * safety data sheet decides.
 */
const CODES: Readonly<Record<Pictogram, readonly string[]>> = {
  explosive: ['H240', 'H241'],
  flame: ['H220', 'H222', 'H223', 'H224', 'H225', 'H226', 'H228', 'H241', 'H242', 'H250', 'H251', 'H252'],
  oxidiser: ['H270', 'H271', 'H272'],
  gas: ['H280'],
  corrosion: ['H290', 'H314', 'H318'],
  skull: ['H300', 'H301', 'H310', 'H311', 'H330', 'H331'],
  health: ['H304', 'H334', 'H340', 'H341', 'H350', 'H351', 'H360', 'H361', 'H370', 'H371', 'H372', 'H373'],
  exclamation: ['H302', 'H312', 'H315', 'H317', 'H319', 'H332', 'H335', 'H336', 'H420'],
  environment: ['H400', 'H410', 'H411'],
}
const SKIN_AND_EYE = ['H315', 'H319']
const SENSITISER = ['H315', 'H317', 'H319']

/** `H361fd` counts as `H361`. */
const plain = (code: string): string => code.slice(0, 4)

/**
 * The diamonds of a mixture of these statements, without those that a stronger one makes superfluous (CLP, Article 26:
 * the skull for the exclamation mark, corrosion for irritation of skin and eyes, respiratory sensitising for
 * irritation and skin sensitising).
 */
export function pictogramsOf(codes: readonly string[]): Pictogram[] {
  const plainCodes = codes.map(plain)
  const has = (kind: Pictogram): boolean => plainCodes.some(code => CODES[kind].includes(code))
  const silenced = [
    ...(has('corrosion') ? SKIN_AND_EYE : []),
    ...(plainCodes.includes('H334') ? SENSITISER : []),
  ]
  const irritant = plainCodes.some(code => CODES.exclamation.includes(code) && !silenced.includes(code)) && !has('skull')
  return (Object.keys(CODES) as Pictogram[]).filter(kind => (kind === 'exclamation' ? irritant : has(kind)))
}
