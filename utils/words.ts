import type { MaterialRole } from '#shared/schemas/material-roles'
import { minutesToMs } from '#shared/utils/instant'
import { patternOf } from '~/utils/batch-words'
import { duration, grams } from '~/utils/format'
import type { ComponentRole } from '~/utils/roles'

/** Plain words for the keys of the API, in one place, so that another language can follow. */
export const ROLE_WORDS = {
  'base': 'Base', 'hardener': 'Hardener', 'thinner': 'Thinner', 'additive': 'Additive', 'accelerator': 'Accelerator', 'peroxide': 'Peroxide',
  'ready-to-use': 'Ready to use',
} as const

export const STEP_WORDS = { prepare: 'Prepare', coat: 'Coat', sand: 'Sand', wait: 'Wait', inspect: 'Inspect' } as const

export const FACE_WORDS = { front: 'front', back: 'back', both: 'both faces', edges: 'edges', all: 'faces and edges' } as const

export const JOB_WORDS = { planned: 'Planned', running: 'Running', done: 'Done', held: 'Held' } as const

export const GUN_SHAPE_WORDS = { flat: 'flat panels', frames: 'frames', sticks: 'sticks and chairs' } as const

export const GUN_WORDS = { 'cup-gun': 'Cup gun', 'pressure-pot': 'Pressure pot', 'pump': 'Pump' } as const

export const EXTRACTION_WORDS = { running: 'running', off: 'off', unknown: 'not known' } as const

export const PERSON_WORDS = { sprayer: 'Sprayer', foreman: 'Foreman', manager: 'Manager' } as const

export const REVISION_WORDS = { draft: 'Draft', released: 'Released', superseded: 'Superseded' } as const

export const MOVEMENT_WORDS = {
  received: 'Received', poured: 'Poured', compensation: 'Put right', counted: 'Counted', wasted: 'Wasted', split: 'Split',
} as const

const CUP_NAMES: Record<string, string> = { iso: 'ISO', ford: 'Ford', din: 'DIN', zahn: 'Zahn' }

/** `din-4` → `DIN 4 mm cup`; Ford and Zahn cups are numbered, not measured. */
export function cupName(key: string): string {
  const [standard = '', size = ''] = key.split('-')
  const name = CUP_NAMES[standard] ?? standard
  return standard === 'iso' || standard === 'din' ? `${name} ${size} mm cup` : `${name} cup no. ${size}`
}

/** `acid-curing` → `Acid-curing`. */
export const chemistryWord = (key: string): string => key.charAt(0).toUpperCase() + key.slice(1)

/** The pattern of a material by what it is bought as: ready to use is drawn like a base. */
export const materialPattern = (role: MaterialRole): ComponentRole => patternOf(role === 'ready-to-use' ? 'base' : role)

/** Minutes of the API for the eye: `90` → `1 h 30`. */
export const minutesText = (minutes: string): string => duration(minutesToMs(minutes))

/** From one span to another: `1 h 30 to 8 h`; what has no end says so. */
export function spanText(from: string | null, until: string | null): string | null {
  if (from === null && until === null) return null
  if (until === null) return `from ${minutesText(from ?? '0')} on`
  return `${minutesText(from ?? '0')} to ${minutesText(until)}`
}

/** A range of figures: `110 to 150`, or one of them alone. */
export function figures(low: string | null, high: string | null): string | null {
  if (low === null || high === null || low === high) return low ?? high
  return `${grams(low)} to ${grams(high)}`
}

/** Days ahead or past: `today`, `in 12 days`, `3 days ago`. */
export function daysText(days: number): string {
  if (days === 0) return 'today'
  if (days > 0) return days === 1 ? 'tomorrow' : `in ${days} days`
  return days === -1 ? 'yesterday' : `${-days} days ago`
}
