import type { Asker } from '../types/roles'

const people = ['sprayer', 'foreman', 'manager'] as const
const seniors = ['foreman', 'manager'] as const
const everyone = [...people, 'bench', 'screen'] as const

/** Who may do what: the one table. The server decides by it, the screens only hide by it. */
const permissions = {
  'session:read': everyone,
  'time:read': everyone,
  'calculations:run': [...people, 'bench'],
  'live:read': everyone,
  'bench:read': [...people, 'bench'],
  'drafts:read': [...people, 'bench'],
  'drafts:write': [...people, 'bench'],
  'numbers:take': [...people, 'bench'],
  'numbers:void': seniors,
  'batches:read': [...people, 'bench', 'screen'],
  'batches:create': [...people, 'bench'],
  'batches:event': everyone,
  'batches:close': everyone,
  'batches:search': people,
  'batches:amend': people,
  'batches:review': seniors,
  'timers:read': everyone,
  'timers:create': people,
  'timers:silence': everyone,
  'timers:acknowledge': people,
  'approvals:create': [...people, 'bench'],
  'materials:read': [...people, 'bench'],
  'materials:write': ['manager'],
  'lots:read': [...people, 'bench'],
  'lots:create': people,
  'lots:write': seniors,
  'mixes:read': [...people, 'bench'],
  'mixes:write': ['manager'],
  'schedules:read': [...people, 'bench'],
  'jobs:read': [...people, 'bench'],
  'booths:clean': [...people, 'bench'],
  'shop:read': everyone,
  'booths:extraction': people,
  'people:read': everyone,
  'shop:write': seniors,
  'users:read': seniors,
  'users:write': ['manager'],
  'settings:read': ['manager'],
  'settings:write': ['manager'],
  'password:change': people,
  'devices:read': ['manager'],
  'devices:write': ['manager'],
  'climate:read': everyone,
  'climate:write': [...people, 'bench'],
  'audit:read': seniors,
  'approvals:give': seniors,
} satisfies Record<string, readonly Asker[]>

export type Action = keyof typeof permissions

/** True when the asker may do it. The system may do everything. */
export function may(asker: Asker, action: Action): boolean {
  return asker === 'system' || (permissions[action] as readonly Asker[]).includes(asker)
}

/** All actions, for the generated permission matrix. */
export const actions = Object.keys(permissions) as Action[]
