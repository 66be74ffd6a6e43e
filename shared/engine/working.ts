import type { Dec } from './decimal'
import { print } from './decimal'

/** One line of a sum as it is shown when a figure is opened. */
export interface WorkingLine {
  /** What the line finds: `out of the gun`. */
  what: string
  /** The sum with its figures: `2592 g ÷ 60 %`. */
  formula: string
  /** Plain decimal. */
  value: string
  unit: string
}

export function line(what: string, formula: string, value: Dec, unit: string): WorkingLine {
  return { what, formula, value: print(value), unit }
}
