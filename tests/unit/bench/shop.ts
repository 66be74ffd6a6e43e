import type { BenchMix, BenchSnapshot } from '#shared/schemas/bench'
import type { BenchSetup } from '#shared/utils/bench-setup'
import { benchTools } from '#shared/utils/bench-tools'
import type { BenchTools } from '#shared/utils/bench-tools'

/** UUIDs that can be read: `id(7)`. */
export const id = (n: number): string => `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`

type Role = BenchMix['components'][number]['role']

const material = (n: number, code: string, role: Role, more: Partial<BenchSnapshot['materials'][number]> = {}): BenchSnapshot['materials'][number] => ({
  id: id(n), code, name: code, role, chemistry: 'polyurethane', containsIsocyanates: false, densityGPerMl: '1', pricePerKg: null, signalWord: null, hazards: [],
  protectionMixing: null, protectionSpraying: null, ...more,
})

const part = (index: number, materialId: string, role: Role, parts: string): BenchMix['components'][number] => ({
  index, materialId, role, parts, partsMax: null, tolerancePct: null, reactive: role === 'hardener' || role === 'peroxide',
})

const lot = (n: number, materialId: string, expiresOn: string | null): BenchSnapshot['lots'][number] => ({
  id: id(n), materialId, lotNumber: `L-${n}`, expiresOn, openedAt: null, state: 'sealed', blockedReason: null, place: null, pricePerKg: null, stockG: '5000',
})

/** A shop with one two-pack mix 100 : 50 : 20, one gun, one scale of 0.1 g and cups of 1 L and 2.5 L. */
export function snapshot(more: Partial<BenchSnapshot> = {}): BenchSnapshot {
  return {
    serverNow: '2026-11-17T08:00:00.000Z',
    lastSeq: 1,
    mixes: [{
      id: id(1), code: 'M-1', name: 'Sealer', revisionId: id(2), revisionNumber: 1, basis: 'weight', potLifeMin: '240', potLifeReferenceC: '20', potLifeTable: null,
      halvesPerC: null, lateFromPct: '75', inductionMin: '0', viscosityCup: null, viscositySecondsMin: null, viscositySecondsMax: null, densityGPerMl: null, notes: null,
      components: [part(0, id(11), 'base', '100'), part(1, id(12), 'hardener', '50'), part(2, id(13), 'thinner', '20')],
    }],
    materials: [
      material(11, 'PS-210', 'base'),
      material(12, 'PH-40', 'hardener', { containsIsocyanates: true, protectionMixing: 'A2-P3 mask, nitrile gloves, eye protection.' }),
      material(13, 'PT-9', 'thinner'),
    ],
    lots: [lot(21, id(11), '2027-03-01'), lot(22, id(11), '2026-12-01'), lot(23, id(11), '2026-11-16'), lot(24, id(12), null), lot(25, id(13), '2027-01-01')],
    guns: [{
      id: id(31), name: 'Gun 2', kind: 'cup-gun', boothId: id(51), efficiencyPct: { flat: '60', frames: '50', sticks: '35' }, efficiencyMeasured: true, residueG: '150',
      smallestFillG: '100', flowGPerMin: null, paceM2PerH: '4.2',
    }],
    scales: [{ id: id(41), name: 'Scale 2', source: 'keypad', divisionG: '0.1', capacityG: '6000', mpeG: null }],
    cups: [{ id: id(45), name: '2.5 L', capacityMl: '2500', fillLineMl: '1900' }, { id: id(46), name: '1 L', capacityMl: '1000', fillLineMl: '800' }],
    booths: [{ id: id(51), name: 'Booth 1', past: [], cleanedAt: null, climate: null }],
    people: [],
    today: [],
    drafts: [],
    chemistryRules: [],
    paces: [],
    ...more,
  }
}

/** The form filled for 7.2 m² at 120 g/m² on the panel with 60 % and 150 g in hose, cup and filter. */
export function setup(more: Partial<BenchSetup> = {}): BenchSetup {
  return {
    stepId: null, loose: true, purpose: 'sample', mixId: id(1), way: 'area', areaM2: '7.2', pieceIds: [], totalG: '', tinIndex: 0, tinG: '', coats: 1,
    filmWeightGsm: '120', filmWeightIs: 'deposited', gunId: id(31), shape: 'flat', residueG: '150', reservePct: '', paceM2PerH: '4.2', cupId: id(45), cupChosen: false, scaleId: id(41), boothId: id(51), ...more,
  }
}

export function tools(shop: BenchSnapshot = snapshot()): BenchTools {
  const found = benchTools({ mixId: id(1), scaleId: id(41), cupId: id(45), gunId: id(31), boothId: id(51) }, shop)
  if (found === null) throw new Error('the shop of the tests lacks a tool')
  return found
}
