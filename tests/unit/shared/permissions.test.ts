import { describe, expect, it } from 'vitest'
import { actions, may } from '#shared/utils/permissions'

describe('the permission table', () => {
  it('lets nobody do anything without being known', () => {
    expect(actions.filter((action) => may('nobody', action))).toEqual([])
  })

  it('lets a booth screen read its booth, silence, spray and empty, and nothing else', () => {
    expect(actions.filter((action) => may('screen', action)).sort()).toEqual([
      'batches:close', 'batches:event', 'batches:read', 'climate:read', 'live:read', 'people:read', 'session:read', 'shop:read', 'time:read', 'timers:read', 'timers:silence',
    ])
  })

  it('gives a foreman all that a sprayer may, and a manager all that a foreman may', () => {
    expect(actions.filter((action) => may('sprayer', action) && !may('foreman', action))).toEqual([])
    expect(actions.filter((action) => may('foreman', action) && !may('manager', action))).toEqual([])
  })

  it('keeps devices, people and approvals from those who must not have them', () => {
    for (const action of ['devices:write', 'users:read', 'approvals:give'] as const) {
      for (const asker of ['sprayer', 'bench', 'screen', 'nobody'] as const) expect(may(asker, action)).toBe(false)
    }
  })
})
