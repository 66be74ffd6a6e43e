import { describe, expect, it } from 'vitest'
import { audienceOf, hearingOf } from '../../../server/live/audience'
import type { Principal } from '../../../server/utils/context'
import { Refusal } from '../../../server/utils/errors'

const device = (kind: 'bench' | 'screen', boothId: string | null): Principal =>
  ({ kind: 'device', user: null, device: { id: 'd', kind, name: 'Device', boothId, scaleId: null } })
const person: Principal = { kind: 'user', user: { id: 'u', role: 'sprayer', name: 'Ada', initials: 'AL', email: 'a@potbell.example', sessionId: 's' }, device: null }

describe('the audience', () => {
  it('of a screen is its own booth, whatever it leaves out', () => {
    expect(audienceOf(device('screen', 'one'), undefined)).toEqual({ boothId: 'one' })
    expect(audienceOf(device('screen', 'one'), 'one')).toEqual({ boothId: 'one' })
    expect(() => audienceOf(device('screen', 'one'), 'two')).toThrow(Refusal)
  })

  it('of everybody else is what they ask for', () => {
    expect(audienceOf(person, 'two')).toEqual({ boothId: 'two' })
    expect(audienceOf(person, undefined)).toEqual({ boothId: null })
    expect(audienceOf(device('bench', 'one'), 'two')).toEqual({ boothId: 'two' })
  })
})

describe('what an audience hears', () => {
  const hear = (type: string, boothId: string | null, payload: unknown) =>
    hearingOf({ boothId: 'one' }, { type, boothId, payloadJson: JSON.stringify(payload) })

  it('is its own booth and what belongs to none', () => {
    expect([hear('pot', 'one', {}), hear('timer', null, { kind: 'free' }), hear('climate', 'one', {})]).toEqual(['whole', 'whole', 'whole'])
  })

  it('is pots whose life is up in any booth', () => {
    expect(hear('timer', 'two', { kind: 'pot-up' })).toBe('whole')
    expect(hear('timer', 'two', { kind: 'pot-late' })).toBe('nothing')
    expect(hear('window', 'two', {})).toBe('nothing')
  })

  it('is that a pot is not here when it is in another booth', () => {
    expect(hear('pot', 'two', { code: 'B-0001' })).toBe('gone')
  })

  it('is everything for the whole shop', () => {
    expect(hearingOf({ boothId: null }, { type: 'window', boothId: 'two', payloadJson: '{}' })).toBe('whole')
  })
})
