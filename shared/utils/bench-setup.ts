import type { BenchMix, BenchPace, BenchSnapshot, BenchStep } from '../schemas/bench'
import { offeredLots } from './bench-lots'
import type { GunShape, ToolChoice } from './bench-tools'
import { addUp, roundedText } from './decimal-text'

/** The three ways to say how much. */
export type BenchWay = 'area' | 'total' | 'tin'

/** What the form of step 1 holds. Quantities are as typed: plain decimals, or text that the arithmetic will refuse. */
export interface BenchSetup {
  /** The job step, or null for a loose mix. */
  stepId: string | null
  loose: boolean
  purpose: string
  mixId: string
  way: BenchWay
  areaM2: string
  /** Chosen pieces, in the order of the job's list; empty while the area was typed. */
  pieceIds: string[]
  totalG: string
  /** Component whose rest decides, by its place in the mix. */
  tinIndex: number
  tinG: string
  coats: number
  filmWeightGsm: string
  filmWeightIs: 'deposited' | 'sprayed' | null
  gunId: string
  shape: GunShape
  /** Lost in hose, cup and filter of each pot. */
  residueG: string
  /** More than what is sprayed, per cent; empty for none. */
  reservePct: string
  paceM2PerH: string
  cupId: string
  /** The cup was chosen by hand; else the smallest that fits is taken. */
  cupChosen: boolean
  scaleId: string
  boothId: string
}

/** The tablet's own place in the shop. */
export interface BenchHome {
  boothId: string | null
  scaleId: string | null
  /** Who works here: their own pace is taken before the gun's. */
  userId?: string | null
}

/** An empty form with this bench's own scale and the first cup of the list. */
export function blankSetup(snapshot: BenchSnapshot, home: BenchHome): BenchSetup {
  const scale = snapshot.scales.find(({ id }) => id === home.scaleId) ?? snapshot.scales[0]
  const booth = snapshot.booths.find(({ id }) => id === home.boothId) ?? snapshot.booths[0]
  return {
    stepId: null,
    loose: false,
    purpose: '',
    mixId: '',
    way: 'area',
    areaM2: '',
    pieceIds: [],
    totalG: '',
    tinIndex: 0,
    tinG: '',
    coats: 1,
    filmWeightGsm: '',
    filmWeightIs: null,
    gunId: '',
    shape: 'flat',
    residueG: '',
    reservePct: '',
    paceM2PerH: '',
    cupId: snapshot.cups[0]?.id ?? '',
    cupChosen: false,
    scaleId: scale?.id ?? '',
    boothId: booth?.id ?? '',
  }
}

/** What of a coat is still to be mixed: its pieces, the coats that all of them still need, and their exact area, m². */
function toMix(step: BenchStep): Pick<BenchSetup, 'pieceIds' | 'coats' | 'areaM2'> {
  const open = step.pieces.filter(({ heldReason, coatsLeft }) => heldReason === null && coatsLeft > 0)
  const pieceIds = open.map(({ id }) => id)
  if (open.length === 0) return { pieceIds, coats: step.coats, areaM2: '' }
  return { pieceIds, coats: Math.min(...open.map(({ coatsLeft }) => coatsLeft)), areaM2: areaOfPieces(step, pieceIds) }
}

/** Exact sum of the chosen pieces, m². */
export function areaOfPieces(step: BenchStep, pieceIds: readonly string[]): string {
  return addUp(step.pieces.filter(({ id }) => pieceIds.includes(id)).map(({ areaM2 }) => areaM2))
}

/** A row of today's list: material, pieces, coat weight, booth and gun as the schedule has them. */
export function setupForStep(step: BenchStep, snapshot: BenchSnapshot, home: BenchHome, before: BenchSetup): BenchSetup {
  const setup: BenchSetup = {
    ...blankSetup(snapshot, home),
    stepId: step.jobStepId,
    mixId: step.mixId ?? '',
    ...toMix(step),
    filmWeightGsm: step.filmWeightGsm ?? '',
    filmWeightIs: step.filmWeightIs,
    shape: step.gunShape,
    scaleId: before.scaleId,
  }
  const boothId = step.boothId ?? setup.boothId
  return chooseGun({ ...setup, boothId }, gunFor(snapshot, step.gunId, boothId), snapshot, home.userId)
}

/**
 * The form after a pot of it went into the log: gun, cup and coat weight stand, the pieces are those that are left.
 * A coat that has left the list leaves an empty form.
 */
export function setupAfterPot(setup: BenchSetup, snapshot: BenchSnapshot, home: BenchHome): BenchSetup {
  if (setup.stepId === null) return setup
  const step = snapshot.today.find(({ jobStepId }) => jobStepId === setup.stepId)
  return step === undefined ? { ...blankSetup(snapshot, home), scaleId: setup.scaleId } : { ...setup, ...toMix(step) }
}

/** The form for a mix without a job: its purpose has to be said. */
export function setupForLoose(snapshot: BenchSnapshot, home: BenchHome, before: BenchSetup): BenchSetup {
  const setup: BenchSetup = { ...blankSetup(snapshot, home), loose: true, filmWeightIs: 'deposited', scaleId: before.scaleId }
  return chooseGun(setup, gunFor(snapshot, null, setup.boothId), snapshot, home.userId)
}

function gunFor(snapshot: BenchSnapshot, gunId: string | null, boothId: string): string {
  const guns = snapshot.guns
  return (guns.find(({ id }) => id === gunId) ?? guns.find(gun => gun.boothId === boothId) ?? guns[0])?.id ?? ''
}

/** A gun brings its own residue, and the pace that was measured of this person with it, or else its own. */
export function chooseGun(setup: BenchSetup, gunId: string, snapshot: BenchSnapshot, userId: string | null = null): BenchSetup {
  const gun = snapshot.guns.find(({ id }) => id === gunId)
  if (!gun) return { ...setup, gunId: '' }
  return { ...setup, gunId, residueG: gun.residueG, paceM2PerH: ownPace(snapshot, gunId, userId)?.m2PerH ?? gun.paceM2PerH ?? '' }
}

function ownPace(snapshot: BenchSnapshot, gunId: string, userId: string | null | undefined): BenchPace | undefined {
  return snapshot.paces.find(pace => pace.gunId === gunId && pace.userId === userId)
}

/** Where the pace in the form comes from, in words. */
export function paceWords({ paceM2PerH, gunId }: BenchSetup, snapshot: BenchSnapshot, userId: string | null): string {
  const own = ownPace(snapshot, gunId, userId)
  if (paceM2PerH === '') return 'not known: divided by the cup only'
  if (own !== undefined && paceM2PerH === own.m2PerH) return `your last ${own.batches} pots`
  return paceM2PerH === snapshot.guns.find(({ id }) => id === gunId)?.paceM2PerH ? 'as recorded for this gun' : 'as given here'
}

/** The area as a form shows it: chosen pieces add up exactly and are rounded for the eye only, a typed area stands as typed. */
export function shownArea({ areaM2, pieceIds }: BenchSetup): string {
  return pieceIds.length === 0 || areaM2 === '' ? areaM2 : roundedText(areaM2, 2)
}

/** What is in the tins on offer of one component by the stock list; the first to expire is the one that is poured from. */
export function lotRest(setup: BenchSetup, snapshot: BenchSnapshot, today: string): { lotNumber: string, grams: string } | null {
  const mix = snapshot.mixes.find(({ id }) => id === setup.mixId)
  const part = mix?.components[setup.tinIndex]
  const [lot] = part === undefined ? [] : offeredLots(snapshot, part.materialId, today)
  return lot === undefined ? null : { lotNumber: lot.lotNumber, grams: lot.stockG }
}

/** Another mix: what is left of a component that it has not starts again at its base. */
export function chooseMix(setup: BenchSetup, mix: BenchMix | undefined): BenchSetup {
  return { ...setup, mixId: mix?.id ?? '', tinIndex: 0, tinG: '' }
}

/** Typing an area leaves the chosen pieces behind: nobody knows any more which of them are meant. */
export function typeArea(setup: BenchSetup, areaM2: string): BenchSetup {
  return { ...setup, areaM2, pieceIds: [] }
}

export function toolChoice(setup: BenchSetup): ToolChoice {
  return {
    mixId: setup.mixId, scaleId: setup.scaleId, cupId: setup.cupId, gunId: setup.gunId || null, boothId: setup.boothId || null,
  }
}

/** Per cent of what leaves the gun that stays on the panel, for the shape of work. Null without a gun. */
export function efficiencyOf(setup: BenchSetup, snapshot: BenchSnapshot): string | null {
  const gun = snapshot.guns.find(({ id }) => id === setup.gunId)
  return gun === undefined ? null : gun.efficiencyPct[setup.shape]
}
