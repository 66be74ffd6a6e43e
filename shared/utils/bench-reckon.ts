import { planBatch } from '../engine/batch'
import type { BatchPlan } from '../engine/batch'
import { D, print, readNonNegative, readPositive, sum } from '../engine/decimal'
import { EngineError } from '../engine/error'
import { calculatePots } from '../engine/pots'
import type { PlannedPot, PotBound, PotsCaution } from '../engine/pots'
import type { BenchSnapshot } from '../schemas/bench'
import type { DraftPlan } from '../schemas/drafts'
import { unreckoned } from './bench-faults'
import type { BenchFault } from './bench-faults'
import { efficiencyOf, toolChoice } from './bench-setup'
import type { BenchSetup } from './bench-setup'
import { benchPotLife, benchTools } from './bench-tools'
import type { BenchTools } from './bench-tools'

/** One pot of the plan, with its own figures and their working. */
export interface BenchPot {
  number: number
  plan: DraftPlan
  batch: BatchPlan
  /** Null where no area is known. */
  areaM2: string | null
  /** Chosen pieces in it; empty where the area was typed. */
  pieceIds: string[]
  /** Place of the first and last piece in the whole list, from 1; null without pieces. */
  span: { from: number, to: number } | null
  startsAfterMin: string | null
}

export interface BenchReckoning {
  faults: BenchFault[]
  tools: BenchTools | null
  /** Everything in one pot, whether it fits or not; null while something is missing. */
  whole: BatchPlan | null
  pots: BenchPot[]
  boundBy: PotBound
  cautions: PotsCaution[]
  /** Sum of the pots' targets, grams. */
  totalG: string | null
  /** What the reserve adds to what is sprayed, grams; null without one. */
  reserveG: string | null
}

/** Paths of the arithmetic → fields of the form. */
const FIELDS: readonly (readonly [RegExp, keyof BenchSetup])[] = [
  [/^areaM2|^pieceAreasM2/, 'areaM2'],
  [/^totalG/, 'totalG'],
  [/^available/, 'tinG'],
  [/^filmWeightGsm/, 'filmWeightGsm'],
  [/^filmWeightIs/, 'filmWeightIs'],
  [/^transferEfficiencyPct/, 'gunId'],
  [/^reserveG|^residueG/, 'residueG'],
  [/^reservePct/, 'reservePct'],
  [/^paceM2PerH/, 'paceM2PerH'],
  [/^coats/, 'coats'],
  [/^cup/, 'cupId'],
  [/^scale/, 'scaleId'],
  [/^mix|^potLife|^referenceMin|^table/, 'mixId'],
]

/** A refusal of the arithmetic beside the field that caused it. */
export function faultOf(error: EngineError): BenchFault {
  const field = FIELDS.find(([path]) => path.test(error.field))?.[1] ?? 'form'
  return { field, message: error.message, kind: 'refused' }
}

/** Targets, working and pots for the form as it stands. Never throws for what was typed: faults stand beside their fields. */
export function reckon(setup: BenchSetup, snapshot: BenchSnapshot): BenchReckoning {
  const before = unreckoned(setup, snapshot)
  const nothing: BenchReckoning = { ...before, faults: [...before.faults, ...unreadable(setup)] }
  try {
    const tools = benchTools(toolChoice(setup), snapshot)
    if (tools === null || nothing.faults.some(({ field, kind }) => kind === 'refused' || BLOCKING.has(field))) return { ...nothing, tools }
    return { ...nothing, ...plans(setup, snapshot, tools) }
  }
  catch (error) {
    if (!(error instanceof EngineError)) throw error
    return { ...nothing, faults: [...nothing.faults, faultOf(error)] }
  }
}

/** Without these nothing can be reckoned; a missing purpose or gun still lets the figures stand. */
const BLOCKING: ReadonlySet<BenchFault['field']> = new Set(['mixId', 'areaM2', 'totalG', 'tinG', 'filmWeightGsm', 'filmWeightIs', 'cupId', 'scaleId'])

/** Numbers in use that cannot be read, each beside its own field, whatever else is still missing. */
function unreadable(setup: BenchSetup): BenchFault[] {
  const amount = ({ area: 'areaM2', total: 'totalG', tin: 'tinG' } as const)[setup.way]
  const fields = [[amount, readPositive], ['filmWeightGsm', readPositive], ['residueG', readNonNegative], ['reservePct', readNonNegative], ['paceM2PerH', readPositive]] as const
  return fields.flatMap(([field, read]) => setup[field] === '' ? [] : refusalOf(field, () => read(setup[field], field)))
}

function refusalOf(field: keyof BenchSetup, read: () => unknown): BenchFault[] {
  try {
    read()
    return []
  }
  catch (error) {
    if (!(error instanceof EngineError)) throw error
    return [{ field, message: error.message, kind: 'refused' }]
  }
}

type Film = Pick<DraftPlan, 'filmWeightGsm' | 'filmWeightIs' | 'coats' | 'transferEfficiencyPct'>

function plans(setup: BenchSetup, snapshot: BenchSnapshot, tools: BenchTools): Partial<BenchReckoning> {
  const rest = commonPlan(setup, snapshot, tools)
  const amount = amountOf(setup)
  const whole = planOne({ ...rest, ...amount }, tools)
  const answer = split(setup, snapshot, tools, whole)
  const pieces = setup.way === 'area' ? setup.pieceIds : []
  const one = answer === null || answer.pots.length === 1
  const pots = one
    ? [potOf(1, { ...rest, ...amount }, whole, pieces, pieces.length > 0 ? { from: 1, to: pieces.length } : null, '0')]
    : answer.pots.map((pot, place) => potOfSplit(place + 1, pot, setup, rest, tools, whole.areaM2 !== null))
  return {
    tools,
    whole,
    pots,
    boundBy: answer?.boundBy ?? 'one-pot',
    cautions: answer?.cautions ?? [],
    totalG: print(sum(pots.map(({ batch }) => new D(batch.targetTotalG)))),
    reserveG: setup.reservePct === '' ? null : print(new D(whole.sprayedG).times(setup.reservePct).div(100)),
  }
}

function commonPlan(setup: BenchSetup, snapshot: BenchSnapshot, { scale }: BenchTools): Film & Pick<DraftPlan, 'reserveG' | 'reservePct' | 'scaleDivisionG' | 'scaleMpeG'> {
  const film: Film = setup.filmWeightGsm === ''
    ? {}
    : {
        filmWeightGsm: setup.filmWeightGsm,
        filmWeightIs: setup.filmWeightIs ?? undefined,
        coats: setup.coats,
        transferEfficiencyPct: efficiencyOf(setup, snapshot) ?? undefined,
      }
  return { ...film, reserveG: setup.residueG === '' ? '0' : setup.residueG, reservePct: setup.reservePct === '' ? undefined : setup.reservePct, scaleDivisionG: scale.divisionG, scaleMpeG: scale.mpeG ?? undefined }
}

function amountOf(setup: BenchSetup): Pick<DraftPlan, 'areaM2' | 'totalG' | 'available'> {
  if (setup.way === 'area') return { areaM2: setup.areaM2 }
  return setup.way === 'total' ? { totalG: setup.totalG } : { available: { index: setup.tinIndex, grams: setup.tinG } }
}

function planOne(plan: DraftPlan, tools: BenchTools): BatchPlan {
  return planBatch({ ...plan, mix: tools.input }, { scale: { capacityG: tools.scale.capacityG } })
}

/** Without a known area the grams alone are divided: a pace then says nothing. Null where nothing bounds a pot. */
function split(setup: BenchSetup, snapshot: BenchSnapshot, tools: BenchTools, whole: BatchPlan): ReturnType<typeof calculatePots> | null {
  if (tools.limitG === null) return null
  const life = benchPotLife(tools.mix, { airC: tools.booth?.climate?.airC ?? null, materialC: null })
  const pieces = setup.way === 'area' ? pieceAreas(setup, snapshot) : []
  const residueG = setup.residueG === '' ? '0' : setup.residueG
  return calculatePots({
    mix: tools.input,
    // The reserve is divided among the pots with what is sprayed; the residue is each pot's own.
    sprayG: print(new D(whole.exactTotalG).minus(residueG)),
    residueG,
    areaM2: whole.areaM2 ?? '1',
    pieceAreasM2: pieces.length > 0 ? pieces : undefined,
    cupCapacityG: tools.limitG,
    scaleDivisionG: tools.scale.divisionG,
    scaleCapacityG: tools.scale.capacityG,
    paceM2PerH: whole.areaM2 === null || setup.paceM2PerH === '' ? undefined : setup.paceM2PerH,
    gunFlowGPerMin: tools.gun?.flowGPerMin ?? undefined,
    potLifeMin: life?.potLifeMin,
    lateFromPct: tools.mix.lateFromPct,
    inductionMin: tools.mix.inductionMin,
    coats: setup.filmWeightGsm === '' ? 1 : setup.coats,
  })
}

function pieceAreas(setup: BenchSetup, snapshot: BenchSnapshot): string[] {
  const step = snapshot.today.find(({ jobStepId }) => jobStepId === setup.stepId)
  const areas = new Map(step?.pieces.map(({ id, areaM2 }) => [id, areaM2]))
  return setup.pieceIds.flatMap(id => areas.get(id) ?? [])
}

function potOfSplit(
  number: number, pot: PlannedPot, setup: BenchSetup, rest: ReturnType<typeof commonPlan>, tools: BenchTools, areaKnown: boolean,
): BenchPot {
  const byArea = setup.way === 'area' && areaKnown && pot.coat === undefined
  const plan: DraftPlan = byArea ? { ...rest, areaM2: pot.areaM2 } : { ...rest, totalG: pot.exactTotalG }
  const span = pot.fromPiece === undefined || pot.toPiece === undefined ? null : { from: pot.fromPiece + 1, to: pot.toPiece + 1 }
  const pieces = span === null ? [] : setup.pieceIds.slice(span.from - 1, span.to)
  return potOf(number, plan, planOne(plan, tools), pieces, span, pot.startsAfterMin)
}

function potOf(
  number: number, plan: DraftPlan, batch: BatchPlan, pieceIds: string[], span: BenchPot['span'], startsAfterMin: string | null,
): BenchPot {
  return { number, plan, batch, areaM2: batch.areaM2, pieceIds, span, startsAfterMin }
}

/** Room that a cup keeps for stirring and for a correction: a tenth. Common practice, no source. */
const CUP_ROOM = '1.1'

/** The smallest cup that takes everything at once with some room, the largest where none does. A cup that was chosen by hand stays. */
export function withFittingCup(setup: BenchSetup, snapshot: BenchSnapshot): BenchSetup {
  if (setup.cupChosen) return setup
  const cups = [...snapshot.cups].sort((a, b) => new D(a.fillLineMl).comparedTo(b.fillLineMl))
  const last = cups.at(-1)
  if (last === undefined) return setup
  const { whole, tools } = reckon({ ...setup, cupId: last.id }, snapshot)
  const holds = (fillLineMl: string): boolean => whole !== null && tools !== null && tools.densityGPerMl !== null
    && new D(fillLineMl).times(tools.densityGPerMl).gte(new D(whole.targetTotalG).times(CUP_ROOM))
  return { ...setup, cupId: (cups.find(({ fillLineMl }) => holds(fillLineMl)) ?? last).id }
}
