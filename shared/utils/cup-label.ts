import { D, print, sum } from '../engine/decimal'
import { pictogramsOf, type Pictogram } from '../reference/pictograms'
import type { Batch } from '../schemas/batches'
import type { BenchMaterial, BenchSnapshot } from '../schemas/bench'
import type { Material } from '../schemas/materials'
import { potTimes } from './bench-life'
import { poursOf } from './bench-run'
import type { BenchRun } from './bench-run'
import type { BenchTools } from './bench-tools'

/** What stands on a cup. Instants are epoch milliseconds; grams decimal strings. */
export interface CupLabel {
  /** Null until the server has given it. */
  code: string | null
  mixName: string
  purpose: string
  lines: { code: string, grams: string, lots: string }[]
  signalWord: 'Danger' | 'Warning' | null
  pictograms: Pictogram[]
  isocyanates: boolean
  /** Null where nothing in it reacts: it has no pot life. */
  useBy: number | null
  mixedAt: number | null
  mixedBy: string
}

type Hazardous = Pick<BenchMaterial | Material, 'signalWord' | 'containsIsocyanates'> & { hazards: readonly { code: string }[] }

/** What the materials of a mix warn of, all together; the stronger signal word counts. */
export function warningsOf(materials: readonly Hazardous[]): Pick<CupLabel, 'signalWord' | 'pictograms' | 'isocyanates'> {
  const words = materials.map(({ signalWord }) => signalWord)
  return {
    signalWord: words.includes('Danger') ? 'Danger' : words.includes('Warning') ? 'Warning' : null,
    pictograms: pictogramsOf(materials.flatMap(({ hazards }) => hazards.map(({ code }) => code))),
    isocyanates: materials.some(({ containsIsocyanates }) => containsIsocyanates),
  }
}

/**
 * How the diamonds stand on a label of 62 × 40 mm: one row of up to five, else two rows of smaller ones. None is left out,
 * there are nine in all. Beside them 24 mm stay for the signal word; the code below the name keeps its size.
 *
 * @returns side of a diamond and columns, millimetres
 */
export function diamondRows(count: number): { mm: string, columns: number } {
  return count <= 5 ? { mm: '5.8', columns: count } : { mm: '3.8', columns: Math.ceil(count / 2) }
}

const distinct = (lots: readonly string[]): string => [...new Set(lots)].join(', ')

/** The label of a pot that is still at the bench. */
export function labelOfRun(run: BenchRun, tools: BenchTools, snapshot: BenchSnapshot): CupLabel {
  const step = snapshot.today.find(({ jobStepId }) => jobStepId === run.jobStepId)
  const pieces = run.span === null ? '' : `, pieces ${run.span.from} to ${run.span.to}`
  const pours = poursOf(run)
  return {
    code: run.code,
    mixName: tools.mix.name,
    purpose: `${step ? `${step.jobCode}, ${step.stepTitle}` : run.purpose ?? ''}${pieces}`,
    lines: tools.parts.map(({ index, material }) => {
      const own = pours.filter(pour => pour.index === index)
      return {
        code: material.code,
        grams: print(sum(own.map(({ grams }) => new D(grams)))),
        lots: distinct(own.map(({ lotId }) => snapshot.lots.find(({ id }) => id === lotId)?.lotNumber ?? '')),
      }
    }),
    ...warningsOf(tools.parts.map(({ material }) => material)),
    useBy: potTimes(run, tools)?.endsAt ?? null,
    mixedAt: run.pouredAt === null ? null : Date.parse(run.pouredAt),
    mixedBy: snapshot.people.find(({ id }) => id === run.mixedByUserId)?.name ?? '',
  }
}

/** The label of a batch in the log, with what its materials warn of today. */
export function labelOfBatch(batch: Batch, materials: readonly Hazardous[]): CupLabel {
  return {
    code: batch.code,
    mixName: batch.mixName,
    purpose: batch.jobCode ? [batch.jobCode, batch.stepTitle].filter(Boolean).join(', ') : batch.purpose ?? '',
    lines: batch.components.map(({ materialCode, pouredG, pours }) => ({
      code: materialCode, grams: pouredG, lots: distinct(pours.map(({ lotNumber }) => lotNumber)),
    })),
    ...warningsOf(materials),
    isocyanates: batch.containsIsocyanates,
    useBy: batch.endsAt === null ? null : Date.parse(batch.endsAt),
    mixedAt: Date.parse(batch.mixedAt),
    mixedBy: batch.mixedByName,
  }
}

/**
 * What the label's code says: the address of the batch's own page, so that any phone opens it.
 *
 * @param origin where the shop's Potbell is reached: `PUBLIC_URL`, else as this browser reached it
 * @param path of the batch's page
 */
export const labelAddress = (origin: string, path: string): string => new URL(path, origin).href
