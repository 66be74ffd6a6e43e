import { chemistryWord } from '~/utils/words'

/** The chemistries that finishes for wood come in, for a filter. The key is the shop's own; another one still shows in the list. */
const KEYS = ['nitrocellulose', 'acid-curing', 'polyurethane', 'acrylic', 'polyester', 'uv', 'waterborne', 'solvent-stain', 'oil'] as const

export const chemistries = KEYS.map(key => ({ value: key, label: key === 'uv' ? 'UV-curing' : chemistryWord(key) }))
