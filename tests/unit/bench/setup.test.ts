import { describe, expect, it } from 'vitest'
import type { BenchStep } from '#shared/schemas/bench'
import { unreckoned } from '#shared/utils/bench-faults'
import { reckon } from '#shared/utils/bench-reckon'
import { areaOfPieces, blankSetup, setupAfterPot, setupForStep } from '#shared/utils/bench-setup'
import { id, setup, snapshot } from './shop'

const home = { boothId: id(51), scaleId: id(41) }

const piece = (n: number, coatsLeft: number, more: Partial<BenchStep['pieces'][number]> = {}): BenchStep['pieces'][number] =>
  ({ id: id(n), label: `Front ${n}`, areaM2: '3.6', quantity: 1, faces: 'front', rack: null, heldReason: null, coatsLeft, ...more })

const step = (pieces: BenchStep['pieces'], more: Partial<BenchStep> = {}): BenchStep => ({
  jobStepId: id(61), jobId: id(62), jobCode: 'J-0001', jobTitle: 'Fronts', stepPosition: 1, stepTitle: 'Seal', mixId: id(1), mixRevisionId: id(2), filmWeightGsm: '120',
  filmWeightIs: 'deposited', coats: 1, gunShape: 'flat', boothId: null, gunId: null, pieces, areaM2: '0', ready: 'ready', reason: null, until: null, ...more,
})
const offered = (today: BenchStep) => {
  const { pieceIds, areaM2, coats } = setupForStep(today, snapshot({ today: [today] }), home, setup())
  return { pieceIds, areaM2, coats }
}

describe('a row of today\'s list', () => {
  it('offers only pieces that are not held and not mixed, with their exact area', () => {
    const pieces = [piece(71, 0), piece(72, 1, { areaM2: '0.1' }), piece(73, 1, { areaM2: '0.2' }), piece(74, 1, { heldReason: 'Dent' })]
    expect(offered(step(pieces))).toEqual({ pieceIds: [id(72), id(73)], areaM2: '0.3', coats: 1 })
  })

  it('offers the coats that all of its pieces still need', () => {
    expect(offered(step([piece(71, 1), piece(72, 2)], { coats: 2 }))).toEqual({ pieceIds: [id(71), id(72)], areaM2: '7.2', coats: 1 })
    expect(offered(step([piece(71, 0), piece(72, 2)], { coats: 2 }))).toEqual({ pieceIds: [id(72)], areaM2: '3.6', coats: 2 })
  })

  it('chooses nothing where all is mixed, but lets a mixed piece be chosen by hand', () => {
    const today = step([piece(71, 0), piece(72, 0)])
    const shop = snapshot({ today: [today] })
    const empty = setupForStep(today, shop, home, setup())
    expect(empty).toMatchObject({ pieceIds: [], areaM2: '', coats: 1 })
    expect(reckon(empty, shop).faults).toContainEqual({ field: 'areaM2', message: 'Give the panel area.', kind: 'missing' })
    const again = { ...empty, cupId: id(45), pieceIds: [id(71)], areaM2: areaOfPieces(today, [id(71)]) }
    expect(reckon(again, shop).pots).toMatchObject([{ areaM2: '3.6', pieceIds: [id(71)] }])
  })
})

describe('the form after a pot', () => {
  const filled = setup({ loose: false, purpose: '', stepId: id(61), pieceIds: [id(71), id(72)], filmWeightGsm: '110' })

  it('keeps what was set and goes on to the pieces that are left', () => {
    const shop = snapshot({ today: [step([piece(71, 0), piece(72, 1)])] })
    expect(setupAfterPot(filled, shop, home)).toEqual({ ...filled, pieceIds: [id(72)], areaM2: '3.6' })
  })

  it('is empty once the coat has left the list, and stands for a mix without a job', () => {
    expect(setupAfterPot(filled, snapshot(), home)).toMatchObject({ stepId: null, mixId: '', areaM2: '', pieceIds: [], scaleId: id(41) })
    expect(setupAfterPot(setup(), snapshot(), home)).toEqual(setup())
  })
})

describe('the form without figures', () => {
  it('says of an empty form all that the arithmetic would', () => {
    const empty = blankSetup(snapshot(), home)
    expect(reckon(empty, snapshot())).toEqual(unreckoned(empty, snapshot()))
    expect(unreckoned(empty, snapshot()).faults.map(({ field }) => field)).toContain('mixId')
  })

  it('has the same faults as with them, where all numbers can be read', () => {
    expect(unreckoned(setup({ areaM2: '' }), snapshot()).faults).toEqual(reckon(setup({ areaM2: '' }), snapshot()).faults)
    expect(unreckoned(setup(), snapshot()).pots).toEqual([])
  })
})
