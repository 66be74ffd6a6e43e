import { describe, expect, it } from 'vitest'
import { conditionOf } from '../../../server/services/lots'

const today = '2026-12-01'

describe('conditionOf', () => {
  it.each([
    ['in-use', '2027-03-31', 'in-use'],
    ['sealed', '2027-03-31', 'sealed'],
    ['sealed', null, 'sealed'],
    ['in-use', '2026-12-16', 'in-use'],
    ['in-use', '2026-12-15', 'runs-out'],
    ['sealed', '2026-12-01', 'runs-out'],
    ['in-use', '2026-11-30', 'out-of-date'],
    ['blocked', '2026-11-30', 'blocked'],
    ['empty', '2026-11-30', 'used-up'],
  ] as const)('%s with use-by %s is %s', (state, expiresOn, condition) => {
    expect(conditionOf({ state, expiresOn }, today)).toBe(condition)
  })
})
