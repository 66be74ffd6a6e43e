import type { Knex } from 'knex'
import type { Action } from '#shared/utils/permissions'
import { may } from '#shared/utils/permissions'
import type { Role } from '#shared/types/roles'
import type { Clock } from './clock'
import { forbidden } from './errors'

/** A browser that a manager bound to a bench or a booth's wall. */
export interface DevicePrincipal {
  id: string
  kind: 'bench' | 'screen'
  name: string
  boothId: string | null
  scaleId: string | null
}

export interface UserPrincipal {
  id: string
  role: Role
  name: string
  initials: string
  email: string
  sessionId: string
  /** True while somebody else knows the password: only changing it is answered. */
  mustChangePassword?: boolean
}

/** Who asks. A signed-in person at an enrolled tablet is a user with a device. */
export type Principal =
  | { kind: 'user'; user: UserPrincipal; device: DevicePrincipal | null }
  | { kind: 'device'; user: null; device: DevicePrincipal }
  | { kind: 'nobody'; user: null; device: null }
  | { kind: 'system'; user: null; device: null }

/** Tells the process's event pump that something was committed. */
export interface Wake {
  (seq: number): void
}

/** The key of a POST that may be sent again. */
export interface Idempotency {
  key: string
  route: string
  bodyHash: string
  status: number
}

/** What every service gets first: connection, clock, who asks, and where to announce what was done. */
export interface Context {
  db: Knex
  clock: Clock
  principal: Principal
  requestId: string
  wake: Wake
  idempotency?: Idempotency
}

/** Stable name of the principal for the audit and for idempotency: ids, never names. */
export function principalName(principal: Principal): string {
  if (principal.kind === 'user') return `user:${principal.user.id}`
  if (principal.kind === 'device') return `device:${principal.device.id}`
  return principal.kind
}

/** The id of the person who asks, or null for a device or the system. */
export const userIdOf = (principal: Principal): string | null => principal.user?.id ?? null

/** @throws Refusal 403 when the principal may not do this */
export function requirePermission(principal: Principal, action: Action): void {
  if (!may(roleOf(principal), action)) throw forbidden()
}

/** The row of the permission table that holds for this principal. */
function roleOf(principal: Principal) {
  if (principal.kind === 'user') return principal.user.role
  if (principal.kind === 'device') return principal.device.kind
  return principal.kind
}
