import type { ChemistryRule } from '../engine/chemistry-clash'

const CLEAN_FIRST = 'Dry overspray of the two can heat up and catch fire. Clean booth, duct and filters, and record it, before spraying.'
const WAIT_OR_ISOLATE = 'The later coat can lift or stain the one below. Ask the data sheets, or test on a sample.'

const booth = (first: string, second: string): ChemistryRule =>
  ({ scope: 'booth', first, second, verdict: 'blocked', advice: CLEAN_FIRST })
const bin = (first: string, second: string): ChemistryRule =>
  ({ scope: 'bin', first, second, verdict: 'blocked', advice: 'Keep these wastes in separate closed metal cans; together they can heat up and catch fire.' })
const step = (first: string, second: string, advice = WAIT_OR_ISOLATE): ChemistryRule =>
  ({ scope: 'adjacent-steps', first, second, ordered: true, verdict: 'caution', advice })

/** A starting table: common practice, no source. The makers' data sheets and local fire rules decide. */
export const chemistryRules: readonly ChemistryRule[] = [
  booth('nitrocellulose', 'oil'),
  booth('nitrocellulose', 'polyurethane'),
  { ...booth('nitrocellulose', 'acrylic'), verdict: 'caution' },
  booth('nitrocellulose', 'uv'),
  booth('nitrocellulose', 'polyester'),
  bin('nitrocellulose', 'oil'),
  bin('nitrocellulose', 'polyurethane'),
  { ...bin('nitrocellulose', 'acrylic'), verdict: 'caution' },
  bin('nitrocellulose', 'uv'),
  bin('nitrocellulose', 'polyester'),
  bin('oil', 'polyester'),
  step('nitrocellulose', 'polyurethane'),
  step('nitrocellulose', 'acid-curing'),
  step('oil', 'polyurethane'),
  step('acid-curing', 'polyurethane', 'Acid left in the film disturbs the curing of the next coat. Ask the data sheets.'),
  step('polyester', 'waterborne'),
]
