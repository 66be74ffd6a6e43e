import { describe, expect, it } from 'vitest'
import type { BenchLot, BenchSnapshot, BenchStep } from '#shared/schemas/bench'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { begunWords, boothClash, clashOfSetup } from '#shared/utils/bench-booth'
import { approvalsNeeded, listedLots, lotRefusal, offeredLots } from '#shared/utils/bench-lots'
import { freeCodes, freeRange, takeCode, withBlock } from '#shared/utils/bench-numbers'
import { reckon } from '#shared/utils/bench-reckon'
import { chooseGun, lotRest, paceWords, shownArea } from '#shared/utils/bench-setup'
import { hindranceOf } from '#shared/utils/bench-today'
import { id, setup, snapshot } from './shop'

const today = '2026-11-17'
const past = [{ chemistry: 'nitrocellulose', mixName: 'Topcoat', at: '2026-11-16T08:00:00.000Z' }]
const [booth] = snapshot().booths
const dusty = (more: Partial<BenchSnapshot> = {}): BenchSnapshot =>
  snapshot({ chemistryRules: chemistryRules.flatMap(rule => (rule.scope === 'booth' ? [{ ...rule, scope: 'booth' as const }] : [])), booths: booth ? [{ ...booth, past }] : [], ...more })

describe('a booth that was last used for something else', () => {
  it('clashes both ways round, and the strictest rule speaks', () => {
    expect(boothClash(['polyurethane'], past, chemistryRules)).toMatchObject({ verdict: 'blocked', chemistry: 'polyurethane' })
    expect(boothClash(['nitrocellulose'], [{ ...past[0]!, chemistry: 'oil' }], chemistryRules)?.verdict).toBe('blocked')
    expect(boothClash(['acrylic', 'polyurethane'], past, chemistryRules)?.verdict).toBe('blocked')
    expect(boothClash(['acrylic'], past, chemistryRules)?.verdict).toBe('caution')
    expect(boothClash(['waterborne'], past, chemistryRules)).toBeNull()
  })

  it('says what helps where the other mix is only being mixed: cleaning does not', () => {
    const clash = boothClash(['polyurethane'], past, chemistryRules)
    expect(clash && begunWords(clash, 'Booth 1')).toMatch(/^Topcoat \(nitrocellulose\) is being mixed for Booth 1; this mix is polyurethane\. Take another booth, or wait .*catch fire/)
  })

  it('holds the start back and says why, while the figures stand', () => {
    const { faults, pots } = reckon(setup(), dusty())
    expect(faults).toEqual([{ field: 'boothId', message: expect.stringMatching(/Booth 1 .*nitrocellulose.*catch fire/) as string, kind: 'clash' }])
    expect(pots).toHaveLength(1)
    expect(clashOfSetup(setup({ boothId: '' }), dusty())).toBeNull()
    expect(reckon(setup(), snapshot()).faults).toEqual([])
  })
})

describe('lots that may not be poured', () => {
  const expired = snapshot().lots.find(({ id: lotId }) => lotId === id(23))!
  const blocked: BenchLot = { ...expired, id: id(29), lotNumber: 'L-29', expiresOn: '2027-01-01', state: 'blocked', blockedReason: 'Lumps' }
  const shop = snapshot({ lots: [...snapshot().lots, blocked] })

  it('stand in the list behind those on offer, and are not offered', () => {
    expect(listedLots(shop, id(11), today).map(({ id: lotId }) => lotId)).toEqual([id(22), id(21), id(23), id(29)])
    expect(offeredLots(shop, id(11), today).map(({ id: lotId }) => lotId)).toEqual([id(22), id(21)])
  })

  it('need a foreman\'s word each for what is wrong, a peroxide past its date has no way', () => {
    expect(approvalsNeeded(expired, id(11), today, 'base')).toEqual(['out-of-date'])
    expect(approvalsNeeded(blocked, id(11), today, 'base')).toEqual(['blocked'])
    expect(approvalsNeeded({ ...blocked, expiresOn: '2026-11-01' }, id(11), today, 'base')).toEqual(['blocked', 'out-of-date'])
    expect(approvalsNeeded(expired, id(11), today, 'peroxide')).toEqual([])
    expect(lotRefusal({ ...blocked, expiresOn: '2026-11-01' }, id(11), today, 'peroxide')).toBe('peroxide-out-of-date')
  })
})

describe('numbers that a bench holds', () => {
  const block = { id: id(91), series: 'batch', prefix: 'B-', firstNumber: 431, lastNumber: 433, nextNumber: 431, codes: ['B-0431', 'B-0432', 'B-0433'] }

  it('are given in order and never twice, also when the server tells of the block again', () => {
    const first = takeCode(withBlock(null, block))
    expect(first?.code).toBe('B-0431')
    const again = withBlock(first?.numbers ?? null, block)
    expect(takeCode(again)?.code).toBe('B-0432')
    expect(freeRange(again)).toEqual({ first: 'B-0432', last: 'B-0433' })
  })

  it('run out', () => {
    const all = ['', '', ''].reduce((numbers) => takeCode(numbers)?.numbers ?? numbers, withBlock(null, block))
    expect(freeCodes(all)).toEqual([])
    expect(takeCode(all)).toBeNull()
    expect(freeRange(null)).toBeNull()
  })

  it('given codes that the server has heard of leave the memory', () => {
    const used = { block, given: ['B-0431'] }
    expect(withBlock(used, { ...block, nextNumber: 432, codes: ['B-0432', 'B-0433'] }).given).toEqual([])
  })
})

describe('what the form says', () => {
  it('rounds the area of chosen pieces for the eye only', () => {
    expect(shownArea(setup({ areaM2: '21.6384', pieceIds: [id(71)] }))).toBe('21.64')
    expect(shownArea(setup({ areaM2: '21.6384' }))).toBe('21.6384')
    expect(reckon(setup({ areaM2: '7.2384', pieceIds: [] }), snapshot()).whole?.areaM2).toBe('7.2384')
  })

  it('takes a person\'s measured pace before the gun\'s, and says where a pace comes from', () => {
    const shop = snapshot({ paces: [{ userId: id(81), gunId: id(31), m2PerH: '5.1', batches: 20 }] })
    const own = chooseGun(setup(), id(31), shop, id(81))
    expect(own.paceM2PerH).toBe('5.1')
    expect(paceWords(own, shop, id(81))).toBe('your last 20 pots')
    expect(paceWords(setup(), shop, id(82))).toBe('as recorded for this gun')
    expect(paceWords(setup({ paceM2PerH: '9' }), shop, id(81))).toBe('as given here')
    expect(paceWords(setup({ paceM2PerH: '' }), shop, id(81))).toMatch(/not known/)
  })

  it('puts a pace that cannot be beside its field', () => {
    expect(reckon(setup({ paceM2PerH: '0' }), snapshot()).faults.map(({ field }) => field)).toEqual(['paceM2PerH'])
  })

  it('adds the reserve to what is sprayed, and divides it among the pots', () => {
    const without = reckon(setup(), snapshot())
    const one = reckon(setup({ reservePct: '10' }), snapshot())
    // 7.2 m² × 120 g/m² ÷ 60 % = 1440 g; a tenth of it more.
    expect([without.whole?.exactTotalG, one.whole?.exactTotalG]).toEqual(['1590', '1734'])
    const many = reckon(setup({ areaM2: '21.6', reservePct: '10' }), snapshot())
    expect(many.pots.length).toBeGreaterThan(1)
    const exact = many.pots.reduce((all, { batch }) => all + Number(batch.exactTotalG), 0)
    expect(exact).toBeCloseTo(4320 * 1.1 + 150 * many.pots.length, 6)
  })

  it('knows the rest of the tin that is poured from', () => {
    expect(lotRest(setup({ tinIndex: 0 }), snapshot(), today)).toEqual({ lotNumber: 'L-22', grams: '5000' })
    expect(lotRest(setup({ mixId: '' }), snapshot(), today)).toBeNull()
  })
})

describe('why a coat is not mixed yet', () => {
  const step = (more: Partial<BenchStep> = {}): BenchStep => ({
    jobStepId: id(61), jobId: id(62), jobCode: 'J-0001', jobTitle: 'Fronts', stepPosition: 1, stepTitle: 'Seal', mixId: id(1), mixRevisionId: id(2), filmWeightGsm: '120',
    filmWeightIs: 'deposited', coats: 1, gunShape: 'flat', boothId: id(51), gunId: null, pieces: [], areaM2: '0', ready: 'ready', reason: null, until: null, ...more,
  })

  it('names the missing mix, the booth, the missing lot, and nothing where all is there', () => {
    expect(hindranceOf(step(), snapshot(), null, today)).toBeNull()
    expect(hindranceOf(step({ mixId: null }), snapshot(), null, today)).toMatchObject({ kind: 'no-mix', isFinal: true })
    expect(hindranceOf(step({ mixId: id(99) }), snapshot(), null, today)?.kind).toBe('no-mix')
    expect(hindranceOf(step(), dusty(), null, today)?.kind).toBe('clash')
    expect(hindranceOf(step({ boothId: null }), dusty(), id(51), today)?.kind).toBe('clash')
    expect(hindranceOf(step(), snapshot({ lots: snapshot().lots.filter(({ materialId }) => materialId !== id(12)) }), null, today)).toMatchObject({ kind: 'no-stock', reason: expect.stringContaining('PH-40') as string })
  })

  it('leaves a coat that waits to its window', () => {
    expect(hindranceOf(step({ ready: 'wait' }), dusty(), null, today)).toBeNull()
  })
})
