import { describe, expect, it } from 'vitest'
import { approvalActionOf, lotFaultsOf, newPoursOf, refuseLot } from '../../../server/services/draft-rules'

const lot = { id: 'l', materialId: 'm', materialRole: 'base', lotNumber: 'L-1', expiresOn: '2026-11-17', state: 'in-use' as const }
const pour = (lotId: string, grams = '10') => ({ lotId, grams, at: '2026-11-17T07:00:00.000Z', source: 'typed' as const, round: 0 })

describe('a lot', () => {
  it.each([
    ['is good through its last day', lot, '2026-11-17', []],
    ['is past its date the day after', lot, '2026-11-18', ['expired-lot']],
    ['without a date never expires', { ...lot, expiresOn: null }, '2099-01-01', []],
    ['may be blocked', { ...lot, state: 'blocked' as const }, '2026-11-17', ['blocked-lot']],
    ['may be both', { ...lot, state: 'blocked' as const }, '2026-11-18', ['blocked-lot', 'expired-lot']],
  ])('%s', (_what, one, day, faults) => {
    expect(lotFaultsOf(one, day)).toEqual(faults)
  })

  it('past its date can be approved, a peroxide cannot; a blocked one needs an approval of its own', () => {
    expect(approvalActionOf('expired-lot', lot)).toBe('use-expired-lot')
    expect(approvalActionOf('expired-lot', { materialRole: 'peroxide' })).toBeNull()
    expect(approvalActionOf('blocked-lot', lot)).toBe('use-blocked-lot')
  })

  it('is refused with its number and the way out', () => {
    expect(() => refuseLot('expired-lot', lot, 'components.0.pours.0.lotId')).toThrow('Lot L-1 is past its use-by date. Take another lot, or ask a foreman')
    expect(() => refuseLot('blocked-lot', lot, 'x')).toThrow(expect.objectContaining({ status: 422, code: 'lot-blocked', fields: [expect.objectContaining({ path: 'x' })] }))
  })
})

describe('new weighings', () => {
  const stored = { components: [{ index: 1, pours: [pour('a'), pour('b')] }] }
  const paths = (...lots: string[]) => newPoursOf({ components: [{ index: 1, pours: lots.map((one) => pour(one)) }] }, stored).map(({ path }) => path)

  it('are those beyond the stored ones', () => {
    expect(paths('a', 'b')).toEqual([])
    expect(paths('a', 'b', 'a')).toEqual(['components.0.pours.2.lotId'])
  })
  it('are those whose tin was exchanged', () => {
    expect(paths('a', 'c')).toEqual(['components.0.pours.1.lotId'])
  })
  it('are not those whose grams grew', () => {
    expect(newPoursOf({ components: [{ index: 1, pours: [pour('a', '500')] }] }, stored)).toEqual([])
  })
  it('are all where nothing was stored', () => {
    expect(newPoursOf(stored, null)).toHaveLength(2)
  })
})
