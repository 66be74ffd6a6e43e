import { describe, expect, it } from 'vitest'
import { hazardOf, hazardsOf } from '#shared/utils/bench-hazards'
import { potTimes, standing } from '#shared/utils/bench-life'
import { firstLots, lotByNumber, lotRefusal, lotRefusalWords, offeredLots, runsOutSoon } from '#shared/utils/bench-lots'
import { measuredBefore, MeasureForm, noteMeasured } from '#shared/utils/bench-measure'
import { dueAgain, heldBack, nextDueAt, nextEntry, passes, refused, waited, withEntry, type OutboxEntry } from '#shared/utils/bench-outbox'
import type { BenchRun } from '#shared/utils/bench-run'
import { keypadSource, type ScaleReading } from '#shared/utils/bench-scale'
import { newUuid } from '#shared/utils/uuid'
import { id, snapshot, tools } from './shop'

const today = '2026-11-17'

describe('lots', () => {
  it('offers the one that expires first and leaves out what is out of date', () => {
    expect(offeredLots(snapshot(), id(11), today).map(({ id: lotId }) => lotId)).toEqual([id(22), id(21)])
    expect(firstLots(snapshot(), [id(11), id(12), id(77)], today)).toEqual([id(22), id(24), null])
  })

  it('may be poured on its last day', () => {
    expect(lotRefusal(lotByNumber(snapshot(), 'l-23'), id(11), '2026-11-16')).toBeNull()
    expect(lotRefusal(lotByNumber(snapshot(), 'L-23'), id(11), today)).toBe('out-of-date')
  })

  it('refuses another material and a number nobody booked in', () => {
    expect(lotRefusal(lotByNumber(snapshot(), 'L-24'), id(11), today)).toBe('wrong-material')
    expect(lotRefusal(lotByNumber(snapshot(), 'nothing'), id(11), today)).toBe('unknown')
  })

  it('takes of two lots with one number the one of its material', () => {
    const { lots, ...rest } = snapshot()
    const alike = { ...rest, lots: lots.map(lot => ({ ...lot, lotNumber: 'L-1' })) }
    expect(lotByNumber(alike, 'l-1', id(12))?.materialId).toBe(id(12))
    expect(lotByNumber(alike, 'l-1', id(11))?.materialId).toBe(id(11))
    expect(lotRefusal(lotByNumber(alike, 'l-1', id(77)), id(77), today)).toBe('wrong-material')
  })

  it('tells of a tin of another material what it is', () => {
    const shop = snapshot()
    const other = lotByNumber(shop, 'l-24', id(11))
    expect(other && lotRefusalWords('wrong-material', other, shop.materials)).toMatch(/^Lot L-24 is PH-40 PH-40\. That tin is another material\./)
  })

  it.each([['2026-12-01', true], ['2026-12-02', false], [null, false]])('runs out soon on %s: %s', (expiresOn, soon) => {
    const lot = snapshot().lots[0]
    expect(lot && runsOutSoon({ ...lot, expiresOn }, today)).toBe(soon)
  })
})

describe('hazards', () => {
  it('asks for each thing of the sheet in its own words', () => {
    const [hardener] = hazardsOf(tools().parts)
    expect(hardener).toMatchObject({ kind: 'isocyanates', mixing: ['A2-P3 mask', 'nitrile gloves', 'eye protection'] })
  })

  it('asks nothing for a base that brings none', () => {
    const [base] = tools().parts
    expect(base && hazardOf(base)).toBeNull()
  })
})

describe('pot life and standing', () => {
  const run = { potLife: null, reactiveAt: '2026-11-17T08:00:00.000Z', climate: null, viscosity: null, stirredAt: null } as unknown as BenchRun

  it('is reckoned here until the server has answered', () => {
    expect(potTimes(run, tools())).toEqual({
      startsAt: Date.parse('2026-11-17T08:00:00Z'), lateAt: Date.parse('2026-11-17T11:00:00Z'), endsAt: Date.parse('2026-11-17T12:00:00Z'),
    })
  })

  it('halves ten degrees above the sheet', () => {
    const warm = { ...run, climate: { airC: '30', rhPct: '50', surfaceC: null } }
    expect(potTimes(warm, tools())?.endsAt).toBe(Date.parse('2026-11-17T10:00:00Z'))
  })

  it('stands from the moment it was stirred, and not where the sheet asks for none', () => {
    const shop = snapshot()
    const [mix] = shop.mixes
    const stirred = { ...run, stirredAt: '2026-11-17T08:10:00.000Z' }
    const stands = tools({ ...shop, mixes: mix ? [{ ...mix, inductionMin: '3' }] : [] })
    expect(standing(stirred, stands)?.endsAt).toBe(Date.parse('2026-11-17T08:13:00Z'))
    expect(standing(stirred, tools())).toBeNull()
    expect(standing(run, stands)).toBeNull()
  })
})

describe('the keypad as a scale', () => {
  it('moves while it is typed and stands still a second after the last key', () => {
    const told: ScaleReading[] = []
    let due: (() => void) | null = null
    const source = keypadSource({ now: () => 7, after: (ms, call) => { expect(ms).toBe(1000); due = call; return () => { due = null } } })
    source.readings(reading => told.push(reading))
    source.type('4')
    source.type('43')
    const fire = due as (() => void) | null
    fire?.()
    expect(told).toEqual([{ grams: '4', steady: false, at: 7 }, { grams: '43', steady: false, at: 7 }, { grams: '43', steady: true, at: 7 }])
  })

  it('is steady at once when somebody says so, and never when it is wiped', () => {
    const told: ScaleReading[] = []
    const source = keypadSource({ now: () => 7, after: () => () => undefined })
    source.readings(reading => told.push(reading))
    source.type('43', true)
    source.type('', true)
    expect(told.map(({ steady }) => steady)).toEqual([true, false])
  })
})

describe('outbox', () => {
  const entry = (n: number, kind: OutboxEntry['kind'], subject = 'a'): OutboxEntry => ({
    id: String(n), subject, kind, method: kind === 'draft' ? 'PUT' : 'POST', path: '/', body: {}, idempotencyKey: null, createdAt: n, tries: 0, nextAt: 0, refusal: null,
  })
  const ids = (entries: readonly OutboxEntry[]): string[] => entries.map(one => one.id)

  it('sends only the latest draft of a batch, but never drops one that is on its way', () => {
    const first = withEntry([], entry(1, 'draft'), null)
    expect(ids(withEntry(first, entry(2, 'draft'), null))).toEqual(['2'])
    expect(ids(withEntry(first, entry(2, 'draft'), '1'))).toEqual(['1', '2'])
  })

  it('sends a seal after its draft', () => {
    const entries = withEntry(withEntry(withEntry([], entry(1, 'draft'), null), entry(2, 'seal'), null), entry(3, 'draft'), null)
    expect(ids(entries)).toEqual(['3', '2'])
  })

  it('lets another batch pass one that waits or was refused', () => {
    const entries = [waited(entry(1, 'draft'), 100, 1), entry(2, 'seal'), refused(entry(3, 'draft', 'b'), { status: 422, code: 'rule', message: 'no' }), entry(4, 'draft', 'c')]
    expect(nextEntry(entries, 100)?.id).toBe('4')
    expect(nextEntry(entries, 600)?.id).toBe('1')
    expect(nextDueAt(entries)).toBe(0)
  })

  it('does not wake for what stands behind another', () => {
    expect(nextDueAt([{ ...entry(1, 'draft'), nextAt: 900 }, entry(2, 'seal')])).toBe(900)
    expect(nextDueAt([refused(entry(1, 'draft'), { status: 422, code: 'rule', message: 'no' }), entry(2, 'seal')])).toBeNull()
  })

  it('sends a refused draft again once what stood in its way is done, and no other batch\'s', () => {
    const no = { status: 422, code: 'booth-clash', message: 'no' }
    const again = dueAgain([refused(entry(1, 'draft'), no), refused(entry(2, 'draft', 'b'), no)], 'a')
    expect(nextEntry(again, 1)?.id).toBe('1')
    expect(again.map(({ refusal }) => refusal)).toEqual([null, no])
    expect(dueAgain(again).every(({ refusal }) => refusal === null)).toBe(true)
  })

  it('sends grams of a refused tin again by itself once the server takes them as a fact, and the seal after them', () => {
    const waiting = [heldBack(entry(1, 'draft'), 1_000), entry(2, 'seal')]
    expect(nextEntry(waiting, 120_000)).toBeNull()
    expect(nextEntry(waiting, 126_000)?.id).toBe('1')
  })

  it.each([[0, true], [401, true], [429, true], [503, true], [400, false], [409, false], [422, false]])('tries %s again: %s', (status, again) => {
    expect(passes(status)).toBe(again)
  })
})

describe('measurements', () => {
  const form = { cup: 'din-4', seconds: '', materialC: '', airC: '', rhPct: '', surfaceC: '' }
  it.each([
    [{}, []], [{ seconds: '25.5', materialC: '21' }, []], [{ materialC: '21' }, ['seconds']], [{ airC: '21' }, ['rhPct']], [{ rhPct: '50' }, ['airC']], [{ seconds: '25,5' }, ['seconds']],
  ])('%o lacks %o', (change, faults) => {
    const parsed = MeasureForm.safeParse({ ...form, ...change })
    expect(parsed.success ? [] : parsed.error.issues.map(({ path }) => path[0])).toEqual(faults)
  })
})

describe('the time of a viscosity', () => {
  const form = { cup: 'din-4', seconds: '25', materialC: '21', airC: '', rhPct: '', surfaceC: '' }
  const first = noteMeasured({ climate: null, viscosity: null, viscosityAt: null }, form, false, '2026-11-17T08:00:00.000Z')

  it('is that of its reading, also when the form is looked at again or the climate comes later', () => {
    expect(first).toEqual({ climate: null, viscosity: { cup: 'din-4', seconds: '25', materialC: '21' }, viscosityAt: '2026-11-17T08:00:00.000Z' })
    expect(noteMeasured(first, { ...form, airC: '20', rhPct: '50' }, false, '2026-11-17T09:00:00.000Z').viscosityAt).toBe('2026-11-17T08:00:00.000Z')
    expect(noteMeasured(first, { ...form, seconds: '24' }, false, '2026-11-17T09:00:00.000Z').viscosityAt).toBe('2026-11-17T09:00:00.000Z')
  })

  it('after more thinner is new only where it was measured anew, also with the same seconds', () => {
    expect(measuredBefore(first, true, null)).toMatchObject({ cup: 'din-4', seconds: '', materialC: '' })
    expect(measuredBefore(first, false, null).seconds).toBe('25')
    expect(noteMeasured(first, { ...form, seconds: '', materialC: '', airC: '20', rhPct: '50' }, true, '2026-11-17T09:00:00.000Z')).toMatchObject({ viscosity: first.viscosity, viscosityAt: '2026-11-17T08:00:00.000Z' })
    expect(noteMeasured(first, form, true, '2026-11-17T09:00:00.000Z').viscosityAt).toBe('2026-11-17T09:00:00.000Z')
    expect(noteMeasured(first, { ...form, seconds: '', materialC: '' }, false, '2026-11-17T09:00:00.000Z')).toMatchObject({ viscosity: null, viscosityAt: null })
  })
})

describe('newUuid', () => {
  it('makes version 4 without randomUUID too', () => {
    const { randomUUID } = crypto
    Object.defineProperty(crypto, 'randomUUID', { value: undefined, configurable: true })
    const made = newUuid()
    Object.defineProperty(crypto, 'randomUUID', { value: randomUUID, configurable: true })
    expect(made).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/)
    expect(newUuid()).not.toBe(made)
  })
})
