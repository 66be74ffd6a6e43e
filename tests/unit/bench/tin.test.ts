import { describe, expect, it } from 'vitest'
import type { BenchLot, BenchSnapshot } from '#shared/schemas/bench'
import { draftOf } from '#shared/utils/bench-draft'
import { judgeRun } from '#shared/utils/bench-judge'
import { staysHere } from '#shared/utils/bench-left'
import { isNews, refusalOf, withoutNumber } from '#shared/utils/bench-refusal'
import { nextStep, poursOf, stopRun, type BenchRun } from '#shared/utils/bench-run'
import { gramsOfLot, haltWords, isAllowed, takeTin, tinHalt, toldOfLot, wordsNeeded } from '#shared/utils/bench-tin'
import { begin, kit, pour, typed } from './pots'
import { id, snapshot } from './shop'

const today = '2026-11-17'
const nobody = { approvals: [], faults: [] }
/** The shop after something happened to the lot that the base is poured from. */
const shopWith = (more: Partial<BenchLot>): BenchSnapshot => snapshot({ lots: snapshot().lots.map(lot => (lot.id === id(21) ? { ...lot, ...more } : lot)) })
const blockedShop = shopWith({ state: 'blocked', blockedReason: 'Lumps in it' })
const lotOf = (shop: BenchSnapshot): BenchLot => shop.lots.find(lot => lot.id === id(21))!
const base = kit.parts[0]!

describe('a tin in hand that may no longer be poured from', () => {
  const half = typed(begin(), '300')

  it('halts the pour, says which lot and why, and counts what is in the cup', () => {
    expect(tinHalt(half, kit, snapshot(), today)).toBeNull()
    const halt = tinHalt(half, kit, blockedShop, today)
    expect(halt).toMatchObject({ fault: 'blocked', inCupG: '300', lot: { id: id(21) }, part: { index: 0 } })
    expect(halt && haltWords(halt)).toBe('Lot L-21 was blocked: Lumps in it.')
  })

  it('halts on the day after its last', () => {
    const shop = shopWith({ expiresOn: today })
    expect(tinHalt(half, kit, shop, today)).toBeNull()
    const halt = tinHalt(half, kit, shop, '2026-11-18')
    expect(halt?.fault).toBe('out-of-date')
    expect(halt && haltWords(halt)).toBe('Lot L-21 is past its use-by date.')
  })

  it('is over with another tin: the same weighing goes on from it, and the grams of both are kept', () => {
    const other = takeTin(half, 0, id(22), nobody)
    expect(tinHalt(other, kit, blockedShop, today)).toBeNull()
    const full = typed(other, '876.5', 60_000)
    expect(poursOf(full).map(({ lotId, grams }) => [lotId, grams])).toEqual([[id(21), '300'], [id(22), '576.5']])
    expect(judgeRun(full, kit).mayGoOn).toBe(true)
  })

  it('with nothing of it in the cup is only laid down', () => {
    const other = takeTin(begin(), 0, id(22), nobody)
    expect(other).toMatchObject({ pours: [], lots: [id(22), id(24), id(25)] })
  })

  it('is over with a foreman\'s word, which the draft carries, and nothing is closed by it', () => {
    const allowed = takeTin(half, 0, id(21), { approvals: [id(95)], faults: ['blocked'] })
    expect(tinHalt(allowed, kit, blockedShop, today)).toBeNull()
    expect(isAllowed(allowed, lotOf(blockedShop), base, today)).toBe(true)
    expect(allowed.pours).toEqual([])
    expect(draftOf(allowed, new Date(0).toISOString(), 0).approvals).toEqual([id(95)])
  })

  it('allowed because it was blocked is not allowed past its date', () => {
    const allowed = takeTin(half, 0, id(21), { approvals: [id(95)], faults: ['blocked'] })
    const old = shopWith({ state: 'blocked', expiresOn: '2026-11-16' })
    expect(wordsNeeded(allowed, lotOf(old), base, today)).toEqual(['out-of-date'])
    expect(tinHalt(allowed, kit, old, today)?.fault).toBe('out-of-date')
  })

  it('of an old peroxide is allowed by nobody', () => {
    const peroxide = { ...kit, parts: kit.parts.map(part => (part.index === 0 ? { ...part, role: 'peroxide' as const } : part)) }
    const allowed = takeTin(half, 0, id(21), { approvals: [id(95)], faults: ['out-of-date'] })
    const halt = tinHalt(allowed, peroxide, shopWith({ expiresOn: '2026-11-16' }), today)
    expect(halt?.fault).toBe('peroxide-out-of-date')
    expect(halt && haltWords(halt)).toMatch(/Nobody can allow/)
  })

  it('that is used up by the stock list goes on: there may be more in it than was thought', () => {
    const empty = shopWith({ stockG: '0' })
    expect(tinHalt(half, kit, empty, today)).toBeNull()
    expect(isAllowed(half, lotOf(empty), base, today)).toBe(true)
    expect(isAllowed(takeTin(half, 0, id(22), nobody), lotOf(empty), base, today)).toBe(false)
  })

  it('does not halt what comes after it: its grams are in the cup', () => {
    expect(tinHalt(nextStep(typed(begin(), '876.5'), 0), kit, blockedShop, today)).toBeNull()
  })
})

describe('what the server refuses', () => {
  const poured = pour(begin(), '876.5')
  const entry = { body: { ...draftOf(poured, new Date(0).toISOString(), 0) } }
  const no = (code: string, path?: string): NonNullable<Parameters<typeof refusalOf>[1]> => ({ status: 422, code, message: 'No.', path })

  it('names the lot of the weighing that it refused', () => {
    expect(refusalOf(entry, no('lot-blocked', 'components.0.pours.0.lotId'))).toEqual({ code: 'lot-blocked', message: 'No.', lotId: id(21) })
    expect(refusalOf(entry, no('lot-expired', 'components.7.pours.0.lotId'))).toMatchObject({ lotId: null })
  })

  it.each(['booth-clash', 'forbidden', 'code-not-yours', 'taken-over'])('stops the bench with %s', code => expect(refusalOf(entry, no(code))).toEqual({ code, message: 'No.', lotId: null }))

  it('leaves other faults to the bar', () => expect(refusalOf(entry, no('over-scale', 'components'))).toBeNull())

  it('tells of a lot in the cup once', () => {
    const refusal = { code: 'lot-blocked', message: 'No.', lotId: id(21) }
    expect(isNews(poured, refusal)).toBe(true)
    expect(isNews(toldOfLot(poured, id(21)), refusal)).toBe(false)
    expect(isNews(toldOfLot(poured, id(21)), { code: 'forbidden', message: 'No.', lotId: null })).toBe(true)
    expect(gramsOfLot(poured, id(21))).toBe('876.5')
  })
})

describe('a batch that is left', () => {
  const poured = pour(begin(), '876.5')
  const stopped: BenchRun = stopRun(typed(begin(), '12'), { at: '2026-11-17T08:00:00.000Z', reason: 'Spilled', disposal: 'reacting' })

  it.each(['forbidden', 'code-not-yours', 'booth-clash'])('stays on this bench with its grams where the server says %s', (code) => {
    expect(staysHere(poured, { code }, true)).toBe(true)
    expect(staysHere(stopped, { code }, true)).toBe(true)
    expect(staysHere(begin(), { code }, true)).toBe(false)
  })

  it('that another tablet has taken over stays only for what was not sent from here', () => {
    expect(staysHere(poured, { code: 'taken-over' }, false)).toBe(false)
    expect(staysHere(poured, { code: 'taken-over' }, true)).toBe(true)
  })

  it('whose number is another bench\'s asks the server for one', () => {
    const numbered = { ...poured, code: 'B-0431' }
    expect(draftOf(numbered, new Date(0).toISOString(), 0).code).toBe('B-0431')
    expect(draftOf(withoutNumber(numbered), new Date(0).toISOString(), 0)).toMatchObject({ code: undefined, components: [{ index: 0 }] })
  })
})
