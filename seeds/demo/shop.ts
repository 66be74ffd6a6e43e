import type { Context, UserPrincipal } from '../../server/utils/context'
import type { DemoMaterial } from './materials'
import type { DemoRevision } from './mixes'
import type { BoothKey, GunKey, ScaleKey } from './places'
import type { DemoStep } from './schedules'

export interface MadeRevision {
  id: string
  revision: DemoRevision
}

export interface MadeStep {
  id: string
  position: number
  step: DemoStep
}

/** The ids of what was founded, by the names that the demo's own lists use. */
export interface DemoShop {
  zone: string
  users: Map<string, UserPrincipal>
  booths: Map<BoothKey, string>
  guns: Map<GunKey, string>
  scales: Map<ScaleKey, string>
  materials: Map<string, { id: string, material: DemoMaterial }>
  /** The revision in force. */
  mixes: Map<string, { id: string, current: MadeRevision }>
  /** The released revision. */
  schedules: Map<string, { id: string, current: { id: string, steps: MadeStep[] } }>
}

/** Reads a map that must hold the key: the demo's lists name each other. */
export function the<K, V>(map: ReadonlyMap<K, V>, key: K): V {
  const found = map.get(key)
  if (found === undefined) throw new Error(`the demo shop has no ${String(key)}`)
  return found
}

/** The same context with somebody else asking. */
export const asUser = (ctx: Context, user: UserPrincipal): Context => ({ ...ctx, principal: { kind: 'user', user, device: null } })
