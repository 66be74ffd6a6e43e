import { D } from '#shared/engine/decimal'
import { calculateFilm } from '#shared/engine/film'
import { line } from '#shared/engine/working'
import type { Schedule, ScheduleItem, ScheduleListQuery, ScheduleStep, StepMix } from '#shared/schemas/schedules'
import { findRevisions, type StoredRevision } from '../repositories/mixes'
import {
  findSchedule, jobsOfRevision, listScheduleRevisions, listSchedules, listStepMixes, listSteps, type StoredStep,
} from '../repositories/schedules'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
import { densityOf, tryMix } from './mixes'
import { pageOf, readCursor, type Page } from './paging'

const mostJobs = 50

/** A page of schedules by code. */
export async function schedulesPage(ctx: Context, query: ScheduleListQuery): Promise<Page<ScheduleItem>> {
  const [after = null] = readCursor(query.cursor, ['text']) ?? []
  return pageOf(await listSchedules(query, { after, limit: query.limit + 1 }, ctx.db), query.limit, last => [last.code])
}

/**
 * A schedule with one of its revisions: the one asked for, else the released one, else the latest draft.
 * @throws Refusal 404 when there is none
 */
export async function scheduleById(ctx: Context, id: string, revisionId?: string): Promise<Schedule> {
  const schedule = await findSchedule(id, ctx.db)
  if (!schedule) throw notFound('The schedule')
  const revisions = await listScheduleRevisions(id, ctx.db)
  const shown = revisionId === undefined
    ? revisions.find(revision => revision.state === 'released') ?? revisions[0]
    : revisions.find(revision => revision.id === revisionId)
  if (revisionId !== undefined && !shown) throw notFound('This revision')
  if (!shown) return { ...schedule, revision: null, revisions, jobs: [] }
  const [steps, jobs] = await Promise.all([
    describeSteps(ctx, await listSteps(shown.id, ctx.db)),
    jobsOfRevision(shown.id, mostJobs, ctx.db),
  ])
  const { jobCount: _jobCount, ...revision } = shown
  return { ...schedule, revision: { ...revision, steps }, revisions, jobs }
}

/** Stored steps with their mixes as they stand today and the film that their coat weight makes. */
export async function describeSteps(ctx: Context, steps: readonly StoredStep[]): Promise<ScheduleStep[]> {
  const mixes = await stepMixes(ctx, steps)
  return steps.map(({ mixId, ...step }) => {
    const found = mixes.get(mixId ?? '') ?? null
    return { ...step, mix: found?.mix ?? null, ...filmOf(step, found?.revision ?? null) }
  })
}

/** A mix of a step with the revision that would be mixed today. */
export interface StepMixRevision {
  mix: StepMix
  revision: StoredRevision | null
}

/** The mixes of steps, by id. */
export async function stepMixes(ctx: Context, steps: readonly StoredStep[]): Promise<Map<string, StepMixRevision>> {
  const mixes = await listStepMixes([...new Set(steps.flatMap(step => step.mixId ?? []))], ctx.db)
  const revisions = await findRevisions(mixes.flatMap(mix => mix.revisionId ?? []), ctx.db)
  return new Map(mixes.map((mix) => {
    const revision = revisions.find(candidate => candidate.id === mix.revisionId) ?? null
    return [mix.id, {
      revision,
      mix: {
        ...mix,
        parts: revision?.components.map(({ parts, partsMax }) => ({ parts, partsMax })) ?? [],
        potLifeIs: revision?.potLifeIs ?? null,
        potLifeMin: revision?.potLifeMin ?? null,
        lateFromPct: revision?.lateFromPct ?? null,
        inductionMin: revision?.inductionMin ?? null,
        containsIsocyanates: revision?.components.some(component => component.containsIsocyanates) ?? false,
      },
    }]
  }))
}

/** Only a coat weight on the panel makes a film that is known. */
function filmOf(step: Omit<StoredStep, 'mixId'>, revision: StoredRevision | null): Pick<ScheduleStep, 'wetFilmUm' | 'dryFilmUm' | 'filmWorking'> {
  const densityGPerMl = revision ? densityOf(revision, tryMix(revision)) : null
  const volumeSolidsPct = revision?.volumeSolidsPct ?? null
  if (step.filmWeightGsm === null || step.filmWeightIs !== 'deposited' || densityGPerMl === null || volumeSolidsPct === null) {
    return { wetFilmUm: null, dryFilmUm: null, filmWorking: [] }
  }
  const { wetUm, dryUm } = calculateFilm({ densityGPerMl, volumeSolidsPct, filmWeightGsm: step.filmWeightGsm })
  return {
    wetFilmUm: wetUm,
    dryFilmUm: dryUm,
    filmWorking: [
      line('wet film of one coat', `${step.filmWeightGsm} g/m² ÷ ${densityGPerMl} g/mL`, new D(wetUm), 'µm'),
      line('dry film of one coat', `${wetUm} µm × ${volumeSolidsPct} % volume solids`, new D(dryUm), 'µm'),
    ],
  }
}
