/** How what is left in a cup leaves the shop. `key` is what the record keeps. */
export interface Disposal {
  key: 'open-metal-can' | 'nitro-metal-can' | 'solvent-waste' | 'waterborne-waste'
  /** What to do, in one plain line. */
  words: string
}

const defer = 'Follow the safety data sheet and the local waste rules.'

const disposals = {
  reacting: {
    key: 'open-metal-can',
    words: `It still reacts: leave it open in a metal can, away from heat, never sealed. ${defer}`,
  },
  nitrocellulose: {
    key: 'nitro-metal-can',
    words: `Nitrocellulose: closed metal can, kept wet, out every shift. ${defer}`,
  },
  water: { key: 'waterborne-waste', words: `Waterborne waste, never down the drain. ${defer}` },
  solvent: { key: 'solvent-waste', words: `Solvent waste, closed metal can. ${defer}` },
} as const satisfies Record<string, Disposal>

/**
 * The way out of the shop for what is left of a batch. Common practice, no source; the maker's sheet decides.
 *
 * @param chemistry of the base, as on its material
 * @param reacting whether a hardener or another reactive component is in the cup
 */
export function disposalFor(chemistry: string, reacting: boolean): Disposal {
  if (reacting) return disposals.reacting
  if (chemistry === 'nitrocellulose') return disposals.nitrocellulose
  return chemistry.startsWith('waterborne') ? disposals.water : disposals.solvent
}

const shortWords: Record<Disposal['key'], string> = {
  'open-metal-can': 'left to harden in an open metal can',
  'nitro-metal-can': 'closed metal can, kept wet',
  'solvent-waste': 'solvent waste',
  'waterborne-waste': 'waterborne waste',
}

/** What the record's key means, in a few words; anything else is the words that were entered. */
export const disposalWordsOf = (key: string): string => shortWords[key as Disposal['key']] ?? key
