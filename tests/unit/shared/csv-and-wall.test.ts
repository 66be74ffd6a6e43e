import { describe, expect, it } from 'vitest'
import { amendRefusal } from '#shared/utils/amend-rights'
import { guardedCell } from '#shared/utils/csv-guard'
import { instantOfWall, wallText, zonedIso } from '#shared/utils/zone'

describe('a cell of a table', () => {
  it.each(['=1+1', '+1', '-1', '@x', '\t=1', '\r=1'])('that begins like a formula is text: %j', (text) => {
    expect(guardedCell(text)).toBe(`'${text}`)
  })
  it.each([['B-0421', 'B-0421'], ['', ''], ['a=b', 'a=b']])('%j stays as it is', (text, cell) => {
    expect(guardedCell(text)).toBe(cell)
  })
  it('without a value is empty', () => {
    expect(guardedCell(null)).toBe('')
  })
})

describe('the wall clock of a zone', () => {
  it.each([
    ['2026-11-17T12:26:05.000Z', 'Europe/Berlin', '2026-11-17T13:26:05+01:00'], ['2026-07-01T12:00:00.000Z', 'Europe/Berlin', '2026-07-01T14:00:00+02:00'],
    ['2026-11-17T12:26:05.000Z', 'America/St_Johns', '2026-11-17T08:56:05-03:30'], ['2026-11-17T12:26:05.000Z', 'UTC', '2026-11-17T12:26:05+00:00'],
  ])('%s in %s reads %s', (iso, zone, text) => {
    expect(zonedIso(Date.parse(iso), zone)).toBe(text)
    expect(instantOfWall(wallText(Date.parse(iso), zone), zone)).toBe(Date.parse(iso))
  })

  it('that shows a time twice means the first, and one that it jumps over still names an instant', () => {
    expect(new Date(instantOfWall('2026-10-25T02:30:00', 'Europe/Berlin')).toISOString()).toBe('2026-10-25T00:30:00.000Z')
    expect(new Date(instantOfWall('2026-03-29T02:30', 'Europe/Berlin')).toISOString()).toBe('2026-03-29T01:30:00.000Z')
  })

  it('reads no other text', () => {
    expect(() => instantOfWall('half past two', 'UTC')).toThrow(RangeError)
  })
})

describe('who may amend', () => {
  const batch = { mixedByUserId: 'me', mixedAt: Date.parse('2026-11-17T22:30:00.000Z') }
  const me = { id: 'me', role: 'sprayer' as const }

  it('is the sprayer himself until the shop\'s day ends, by the shop\'s zone', () => {
    // 23:30 in Berlin: half an hour is left of that day.
    expect(amendRefusal(me, batch, 'Europe/Berlin', Date.parse('2026-11-17T22:59:59.000Z'))).toBeNull()
    expect(amendRefusal(me, batch, 'Europe/Berlin', Date.parse('2026-11-17T23:00:00.000Z'))).toBe('day-over')
    expect(amendRefusal({ ...me, id: 'other' }, batch, 'Europe/Berlin', batch.mixedAt)).toBe('other-person')
  })

  it.each(['foreman', 'manager'] as const)('is any %s at any time', (role) => {
    expect(amendRefusal({ id: 'other', role }, batch, 'Europe/Berlin', batch.mixedAt + 1e12)).toBeNull()
  })
})
