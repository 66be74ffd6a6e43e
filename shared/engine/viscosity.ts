import type { Dec } from './decimal'
import { D, print, readPositive } from './decimal'
import { EngineError } from './error'

/**
 * ν in mm²/s from seconds t: `linear` ν = a·(t − b), `hyperbolic` ν = a·t − b ÷ t, each within its range only.
 * Zahn: ASTM D4212. Ford: ASTM D1200. ISO 2431 and DIN 53211 (withdrawn): from memory.
 */
interface CupEquation {
  form: 'linear' | 'hyperbolic'
  a: string
  b: string
  fromS: string
  toS: string
}

const linear = (a: string, b: string, fromS: string, toS: string): CupEquation => ({ form: 'linear', a, b, fromS, toS })
const hyperbolic = (a: string, b: string, fromS: string, toS: string): CupEquation =>
  ({ form: 'hyperbolic', a, b, fromS, toS })

const CUPS = {
  'iso-3': hyperbolic('0.443', '200', '30', '100'),
  'iso-4': hyperbolic('1.37', '200', '30', '100'),
  'iso-5': hyperbolic('3.28', '220', '30', '100'),
  'iso-6': hyperbolic('6.9', '570', '30', '100'),
  'ford-1': linear('0.49', '35', '55', '100'),
  'ford-2': linear('1.44', '18', '40', '100'),
  'ford-3': linear('2.31', '6.58', '20', '100'),
  'ford-4': linear('3.85', '4.49', '20', '100'),
  'ford-5': linear('12.1', '2', '20', '100'),
  'din-4': hyperbolic('4.57', '452', '25', '150'),
  'zahn-1': linear('1.1', '29', '35', '80'),
  'zahn-2': linear('3.5', '14', '20', '80'),
  'zahn-3': linear('11.7', '7.5', '20', '80'),
  'zahn-4': linear('14.8', '5', '20', '80'),
  'zahn-5': linear('23', '0', '20', '80'),
} as const satisfies Record<string, CupEquation>

export type Cup = keyof typeof CUPS

export interface ViscosityInput {
  cup: Cup
  seconds: string
  toCup?: Cup | undefined
}

export interface ViscosityAnswer {
  mm2PerS: string
  toSeconds?: string
  /** Always: cups of one kind differ, Zahn cups by a tenth and more. Shown as *about*. */
  approximate: true
}

/** Whether a cup's equation holds for a reading. Recorded seconds are kept either way. */
export function inCupRange(cup: Cup, seconds: string): boolean {
  return holds(CUPS[cup], readPositive(seconds, 'seconds', '100000'))
}

/**
 * Seconds of a flow cup → kinematic viscosity, and to the seconds of another cup.
 * @throws EngineError `out-of-cup-range` where a conversion would leave either cup's range
 */
export function calculateViscosity({ cup, seconds, toCup }: ViscosityInput): ViscosityAnswer {
  const time = readPositive(seconds, 'seconds', '100000')
  if (!holds(CUPS[cup], time)) throw outOfRange('seconds', CUPS[cup])
  const viscosity = viscosityOf(CUPS[cup], time)
  if (toCup === undefined) return { mm2PerS: print(viscosity), approximate: true }
  const other = secondsOf(CUPS[toCup], viscosity)
  if (!holds(CUPS[toCup], other)) throw outOfRange('toCup', CUPS[toCup])
  return { mm2PerS: print(viscosity), toSeconds: print(other), approximate: true }
}

function holds({ fromS, toS }: CupEquation, seconds: Dec): boolean {
  return seconds.gte(fromS) && seconds.lte(toS)
}

function viscosityOf({ form, a, b }: CupEquation, seconds: Dec): Dec {
  return form === 'linear' ? seconds.minus(b).times(a) : seconds.times(a).minus(new D(b).div(seconds))
}

/** The equation solved for t; the hyperbolic one has a single positive root. */
function secondsOf({ form, a, b }: CupEquation, viscosity: Dec): Dec {
  if (form === 'linear') return viscosity.div(a).plus(b)
  return viscosity.plus(viscosity.pow(2).plus(new D(a).times(b).times(4)).sqrt()).div(new D(a).times(2))
}

function outOfRange(field: string, { fromS, toS }: CupEquation): EngineError {
  return new EngineError('out-of-cup-range', field, `This cup is converted from ${fromS} to ${toS} s only`)
}
