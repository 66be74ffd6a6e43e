import type { MarkName } from './marks'

/** How loudly a state speaks: quiet, in the house colour, look soon, alarm now. */
export type StateTone = 'plain' | 'muted' | 'ink' | 'soon' | 'alarm'

export interface StateLook {
  word: string
  mark: MarkName
  tone: StateTone
}

/** Every state of the shop: a shape, a word, and last a colour. Keys join the thing and its state. */
export const STATES = {
  'pot-fresh': { word: 'Fresh', mark: 'pot-fresh', tone: 'plain' },
  'pot-closing': { word: 'Closing', mark: 'pot-closing', tone: 'soon' },
  'pot-up': { word: 'Pot life up', mark: 'pot-up', tone: 'alarm' },
  'pot-emptied': { word: 'Emptied', mark: 'pot-emptied', tone: 'muted' },
  'window-wait': { word: 'Wait', mark: 'window-wait', tone: 'muted' },
  'window-open': { word: 'Open', mark: 'window-open', tone: 'plain' },
  'window-closing': { word: 'Closing', mark: 'window-closing', tone: 'soon' },
  'window-missed': { word: 'Missed: sand', mark: 'window-missed', tone: 'alarm' },
  'weight-short': { word: 'Short, keep pouring', mark: 'weight-short', tone: 'plain' },
  'weight-in-tolerance': { word: 'In tolerance', mark: 'weight-in-tolerance', tone: 'plain' },
  'weight-too-much': { word: 'Too much', mark: 'weight-too-much', tone: 'soon' },
  'weight-cannot-tell': { word: 'Cannot tell on this scale', mark: 'weight-cannot-tell', tone: 'muted' },
  'pour-lifted': { word: 'Cup lifted', mark: 'pour-lifted', tone: 'ink' },
  'lot-in-use': { word: 'In use', mark: 'lot-in-use', tone: 'plain' },
  'lot-sealed': { word: 'Sealed', mark: 'lot-in-use', tone: 'muted' },
  'lot-runs-out': { word: 'Runs out soon', mark: 'lot-runs-out', tone: 'soon' },
  'lot-out-of-date': { word: 'Out of date', mark: 'lot-out-of-date', tone: 'muted' },
  'lot-blocked': { word: 'Blocked', mark: 'lot-blocked', tone: 'ink' },
  'lot-used-up': { word: 'Used up', mark: 'lot-used-up', tone: 'muted' },
  'batch-used-late': { word: 'Used late', mark: 'pot-closing', tone: 'soon' },
  'batch-used-past-life': { word: 'Used past life', mark: 'pot-up', tone: 'alarm' },
  'booth-keep-out': { word: 'Keep out without air-fed mask', mark: 'mask', tone: 'ink' },
} as const satisfies Record<string, StateLook>

export type StateName = keyof typeof STATES
