import { D } from '#shared/engine/decimal'
import { line } from '#shared/engine/working'
import type { Job, JobItem, JobListQuery, JobPiece, JobStep, JobWindow } from '#shared/schemas/jobs'
import type { ScheduleStep } from '#shared/schemas/schedules'
import { toIso } from '#shared/utils/instant'
import { daysBetween } from '#shared/utils/zone'
import {
  countJobBatches, findJob, listApplications, listJobBatches, listJobSteps, listJobs, listPieces,
  type JobApplication, type StoredJob, type StoredPiece,
} from '../repositories/jobs'
import { listSteps } from '../repositories/schedules'
import { findWindows } from '../repositories/windows'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
import { materialNeeds } from './job-needs'
import { pieceStepState } from './job-progress'
import { pageOf, readCursor, type Page } from './paging'
import { pieceAreaWorking } from './piece-area'
import { describeSteps } from './schedules'
import { shopDay } from './shop'
import { unendedWindows } from './unended-coats'
import { toLiveWindow } from './windows'

const mostBatches = 50

/** A job without a due day sorts after every job that has one. */
const noDay = '9999-12-31'

type BareStep = Awaited<ReturnType<typeof listJobSteps>>[number]

function describe({ notes: _notes, createdAt: _createdAt, updatedAt: _updatedAt, ...job }: StoredJob, today: string): JobItem {
  return { ...job, dueInDays: job.dueOn === null ? null : daysBetween(today, job.dueOn) }
}

/** A page of jobs, the one due first first; of done ones the last first. */
export async function jobsPage(ctx: Context, query: JobListQuery): Promise<Page<JobItem>> {
  const { today } = await shopDay(ctx)
  const key = readCursor(query.cursor, ['day', 'text'])
  const [on = '', code = ''] = key ?? []
  const stored = await listJobs(query, { after: key ? { on, code } : null, limit: query.limit + 1 }, ctx.db)
  const page = pageOf(stored, query.limit, last => [last.dueOn ?? noDay, last.code])
  return { items: page.items.map(job => describe(job, today)), nextCursor: page.nextCursor }
}

/**
 * A job with its cut list, steps, windows, batches and the material it still needs.
 * @throws Refusal 404 when there is none
 */
export async function jobById(ctx: Context, id: string): Promise<Job> {
  const job = await findJob(id, ctx.db)
  if (!job) throw notFound('The job')
  const { now, today } = await shopDay(ctx)
  const [stored, bare, applications, ended, unended, batchCount, batches, storedSteps] = await Promise.all([
    listPieces(id, ctx.db), listJobSteps(id, ctx.db), listApplications(id, ctx.db), findWindows({ jobIds: [id] }, ctx.db),
    unendedWindows({ jobIds: [id] }, now, ctx.db), countJobBatches(id, ctx.db), listJobBatches(id, mostBatches, ctx.db), listSteps(job.scheduleRevisionId, ctx.db),
  ])
  const scheduled = new Map((await describeSteps(ctx, storedSteps)).map(step => [step.id, step]))
  const steps = bare.flatMap((step) => {
    const asked = scheduled.get(step.scheduleStepId)
    return asked ? [{ bare: step, asked }] : []
  })
  const pieces = stored.map(piece => describePiece(piece, steps, applications))
  const needs = await materialNeeds(ctx, { steps, pieces, applications, storedSteps, today })
  return {
    ...describe(job, today),
    notes: job.notes,
    pieces,
    areaWorking: [line('area of the job', stored.map(piece => piece.areaM2).join(' + ') || '0', new D(job.areaM2), 'm²')],
    steps: steps.map(({ bare: step, asked }, place) => describeStep(step, asked, place, pieces, applications)),
    windows: [...ended, ...unended].map(window => ({ ...toLiveWindow(window, now), ...whereabouts(window.pieceIds, stored) })),
    ...needs,
    batchCount,
    batches,
    serverNow: toIso(now),
    createdAt: job.createdAt,
    updatedAt: job.updatedAt,
  }
}

function describePiece(piece: StoredPiece, steps: readonly { bare: BareStep, asked: ScheduleStep }[], applications: readonly JobApplication[]): JobPiece {
  const own = applications.filter(application => application.pieceIds.includes(piece.id))
  return {
    ...piece,
    areaWorking: pieceAreaWorking(piece),
    stepStates: steps.map(({ bare, asked }) => pieceStepState(
      own.filter(application => application.jobStepId === bare.id),
      { state: bare.state, coats: asked.coats ?? 1, faces: asked.faces },
    )),
  }
}

function describeStep(step: BareStep, asked: ScheduleStep, place: number, pieces: readonly JobPiece[], applications: readonly JobApplication[]): JobStep {
  const last = applications.filter(application => application.jobStepId === step.id)
    .reduce<JobApplication | null>((latest, one) => (latest === null || one.lastAt >= latest.lastAt ? one : latest), null)
  const { scheduleStepId: _scheduleStepId, ...own } = step
  return {
    ...own,
    step: asked,
    donePieceCount: pieces.reduce((count, piece) => count + (piece.stepStates[place] === 'done' ? piece.quantity : 0), 0),
    lastAt: last ? toIso(last.lastAt) : null,
    lastByName: last?.userName ?? null,
    lastBoothName: last?.boothName ?? null,
  }
}

function whereabouts(pieceIds: readonly string[], pieces: readonly StoredPiece[]): Pick<JobWindow, 'racks' | 'pieceCount'> {
  const reached = pieces.filter(piece => pieceIds.includes(piece.id))
  return {
    racks: [...new Set(reached.flatMap(piece => piece.rack ?? []))],
    pieceCount: reached.reduce((count, piece) => count + piece.quantity, 0),
  }
}
