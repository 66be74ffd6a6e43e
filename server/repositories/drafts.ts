import type { Knex } from 'knex'
import type { DraftBody, DraftNote, DraftSummary } from '#shared/schemas/drafts'
import { isoOf, isoOrNull, msOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** What the server adds to a draft's body. */
export interface DraftExtras {
  notes: DraftNote[]
  /** Approvals that were used for this draft. */
  approved: { approvalId: string; action: string; subject: string }[]
}

/** A draft as stored. Instants are epoch milliseconds. */
export interface StoredDraft {
  id: string
  code: string
  seq: number
  state: 'open' | 'sealed' | 'stopped' | 'discarded'
  mixedByUserId: string
  deviceId: string | null
  reactiveAt: number | null
  body: DraftBody
  extras: DraftExtras
  createdAt: number
  updatedAt: number
}

interface DraftRow {
  id: string
  code: string
  seq: number
  state: StoredDraft['state']
  mixed_by_user_id: string
  device_id: string | null
  reactive_at: Date | null
  body: string
  created_at: Date
  updated_at: Date
}

const columns = ['id', 'code', 'seq', 'state', 'mixed_by_user_id', 'device_id', 'reactive_at', 'body', 'created_at', 'updated_at'] as const

function toStored(row: DraftRow): StoredDraft {
  const { server, ...body } = JSON.parse(row.body) as DraftBody & { server: DraftExtras }
  return {
    id: row.id,
    code: row.code,
    seq: row.seq,
    state: row.state,
    mixedByUserId: row.mixed_by_user_id,
    deviceId: row.device_id,
    reactiveAt: msOrNull(row.reactive_at),
    body,
    extras: server,
    createdAt: row.created_at.getTime(),
    updatedAt: row.updated_at.getTime(),
  }
}

export async function findDraft(id: string, db: Db): Promise<StoredDraft | null> {
  const row = await db('batch_drafts').where({ id }).first<DraftRow | undefined>(...columns)
  return row ? toStored(row) : null
}

/** The draft with its row locked until the transaction ends. */
export async function lockDraft(id: string, trx: Knex.Transaction): Promise<StoredDraft | null> {
  const row = await trx('batch_drafts').where({ id }).forUpdate().first<DraftRow | undefined>(...columns)
  return row ? toStored(row) : null
}

/** At which device and by whom a draft was last written. */
export async function findHolderNames({ deviceId, mixedByUserId }: Pick<StoredDraft, 'deviceId' | 'mixedByUserId'>, db: Db): Promise<{ deviceName: string | null; userName: string }> {
  const device = deviceId === null ? undefined : await db('devices').where({ id: deviceId }).first<{ name: string } | undefined>('name')
  const user = await db('users').where({ id: mixedByUserId }).first<{ name: string } | undefined>('name')
  return { deviceName: device?.name ?? null, userName: user?.name ?? 'somebody' }
}

/** What of a draft stands in columns, and its body. */
export type DraftWrite = Pick<StoredDraft, 'id' | 'deviceId' | 'reactiveAt' | 'body' | 'extras'>

function written({ deviceId, reactiveAt, body, extras }: DraftWrite, now: number) {
  return {
    seq: body.seq,
    plan_id: body.planId,
    pot_number: body.potNumber,
    pot_count: body.potCount,
    mix_revision_id: body.mixRevisionId,
    job_step_id: body.jobStepId,
    booth_id: body.boothId,
    gun_id: body.gunId,
    scale_id: body.scaleId,
    mixed_by_user_id: body.mixedByUserId,
    device_id: deviceId,
    reactive_at: reactiveAt === null ? null : toInstant(reactiveAt),
    body: JSON.stringify({ ...body, server: extras }),
    updated_at: toInstant(now),
  }
}

export async function insertDraft(draft: DraftWrite, code: string, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_drafts').insert({ id: draft.id, code, state: 'open', ...written(draft, now), created_at: toInstant(now) })
}

export async function updateDraft(draft: DraftWrite, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_drafts').where({ id: draft.id }).update({ ...written(draft, now), version: trx.raw('version + 1') })
}

export async function endDraft(id: string, state: 'sealed' | 'stopped' | 'discarded', now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_drafts').where({ id }).update({ state, updated_at: toInstant(now), version: trx.raw('version + 1') })
}

interface SummaryRow {
  id: string
  code: string
  seq: number
  pot_number: number
  pot_count: number
  mix_code: string
  mix_name: string
  job_code: string | null
  job_title: string | null
  step_title: string | null
  body: string
  booth_id: string | null
  mixed_by_user_id: string
  mixed_by_name: string
  device_name: string | null
  reactive_at: Date | null
  updated_at: Date
}

/** Drafts that nobody has sealed, the one touched last first. A shop has a handful. */
export async function listOpenDrafts(boothId: string | null, db: Db): Promise<DraftSummary[]> {
  const query = db('batch_drafts as d')
    .join('mix_revisions as r', 'r.id', 'd.mix_revision_id')
    .join('mixes as m', 'm.id', 'r.mix_id')
    .join('users as u', 'u.id', 'd.mixed_by_user_id')
    .leftJoin('devices as v', 'v.id', 'd.device_id')
    .leftJoin('job_steps as s', 's.id', 'd.job_step_id')
    .leftJoin('schedule_steps as c', 'c.id', 's.schedule_step_id')
    .leftJoin('jobs as j', 'j.id', 's.job_id')
    .where('d.state', 'open')
    .orderBy([{ column: 'd.updated_at', order: 'desc' }, { column: 'd.id', order: 'desc' }])
    .limit(200)
    .select<SummaryRow[]>(
      'd.id', 'd.code', 'd.seq', 'd.pot_number', 'd.pot_count', 'm.code as mix_code', 'm.name as mix_name', 'j.code as job_code',
      'j.title as job_title', 'c.title as step_title', 'd.body', 'd.booth_id', 'd.mixed_by_user_id', 'u.name as mixed_by_name', 'v.name as device_name',
      'd.reactive_at', 'd.updated_at',
    )
  if (boothId) void query.where('d.booth_id', boothId)
  return (await query).map(row => ({ row, body: JSON.parse(row.body) as DraftBody })).map(({ row, body }) => ({
    id: row.id,
    code: row.code,
    seq: row.seq,
    potNumber: row.pot_number,
    potCount: row.pot_count,
    mixCode: row.mix_code,
    mixName: row.mix_name,
    jobCode: row.job_code,
    jobTitle: row.job_title,
    stepTitle: row.step_title,
    purpose: body.purpose,
    boothId: row.booth_id,
    mixedByUserId: row.mixed_by_user_id,
    mixedByName: row.mixed_by_name,
    deviceName: row.device_name,
    holder: body.holder ?? null,
    reactiveAt: isoOrNull(row.reactive_at),
    updatedAt: isoOf(row.updated_at),
  }))
}
