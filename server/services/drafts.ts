import { D } from '#shared/engine/decimal'
import type { Knex } from 'knex'
import type { Draft, DraftBody, DraftList, DraftListQuery, DraftNote, PotLife } from '#shared/schemas/drafts'
import { shopDate } from '#shared/utils/zone'
import { emptyCupMs } from '../repositories/booth-cleanings'
import { findDraft, insertDraft, listOpenDrafts, lockDraft, updateDraft, type DraftExtras, type StoredDraft } from '../repositories/drafts'
import { findMixRevision, type MixRevision } from '../repositories/mix-revisions'
import { lockOpenApprovals, useApprovals } from '../repositories/used-approvals'
import type { Context } from '../utils/context'
import { notFound, Refusal, ruleBroken } from '../utils/errors'
import { isoOf, toInstant } from '../utils/rows'
import { mutateUnlessDone } from '../utils/settled'
import { isDuplicate, type Mutation } from '../utils/transactions'
import { mayHold, takenOver } from './draft-holder'
import { planOf, potLives, potTimesOf, reactiveByPours, type PotTimes } from './batch-sums'
import { refuseClash } from './booth-guard'
import { correctedReactiveAt, notAfter } from './device-clock'
import { readReferences, type DraftReferences } from './draft-references'
import { approvalActionOf, factAfterMs, lotFaultsOf, newPoursOf, refuseImpossible, refuseLot } from './draft-rules'
import { requireMixer } from './mixers'
import { claimCode, notYours } from './number-blocks'
import { takeNumber } from './numbers'
import { publishPot } from './pot-view'
import { setPotTimers } from './timers'

/** A pot's instants as the API tells them. */
const toPotLife = (times: PotTimes | null): PotLife => times && {
  startsAt: isoOf(toInstant(times.startsAt)),
  lateAt: isoOf(toInstant(times.lateAt)),
  endsAt: isoOf(toInstant(times.endsAt)),
  basis: times.basis,
  potLifeMin: times.potLifeMin,
}

function toDraft(stored: StoredDraft, revision: MixRevision): Draft {
  return {
    ...stored.body,
    id: stored.id,
    code: stored.code,
    state: stored.state,
    reactiveAt: stored.reactiveAt === null ? null : isoOf(toInstant(stored.reactiveAt)),
    potLife: toPotLife(potTimesOf(revision, stored.body, stored.reactiveAt)),
    notes: stored.extras.notes,
    createdAt: isoOf(toInstant(stored.createdAt)),
    updatedAt: isoOf(toInstant(stored.updatedAt)),
  }
}

/** @throws Refusal 404 */
export async function getDraft(ctx: Pick<Context, 'db'>, id: string): Promise<Draft> {
  return readDraft(id, ctx.db)
}

/** The draft as it stands in a transaction. @throws Refusal 404 */
export async function readDraft(id: string, db: Knex | Knex.Transaction): Promise<Draft> {
  const stored = await findDraft(id, db)
  const revision = stored && (await findMixRevision(stored.body.mixRevisionId, db))
  if (!stored || !revision) throw notFound('The draft')
  return toDraft(stored, revision)
}

/** What is being mixed and was not sealed yet, in the whole shop or at one booth. */
export async function listDrafts(ctx: Pick<Context, 'db'>, { boothId }: DraftListQuery): Promise<DraftList> {
  return { items: await listOpenDrafts(boothId ?? null, ctx.db), nextCursor: null }
}

/**
 * Stores a batch being made, by its sequence number: a lower or equal one than the stored changes nothing and answers
 * the stored draft. The first one gives the batch its code. Once something reactive is together with something else
 * the pot's timers run; that moment may be corrected to an earlier one, never to a later one.
 * A bench that works without network names a code of its own block of numbers. One tablet holds a draft: another takes
 * it over with the next turn, and from then on the first one is refused.
 *
 * @throws Refusal 400 for references that lead nowhere and plans that cannot be, 403 for another person's batch,
 * 409 `already-sealed`, 409 `taken-over`, 422 `code-not-yours`, 422 `booth-clash` before anything is poured, 422 for
 * what cannot be true and for lots that may not be poured
 */
export async function saveDraft(ctx: Context, id: string, body: DraftBody): Promise<Draft> {
  try {
    return await saveOnce(ctx, id, body)
  } catch (error) {
    // Two first saves at once: the other one has committed, so this one finds it.
    if (isDuplicate(error)) return saveOnce(ctx, id, body)
    throw error
  }
}

function saveOnce(ctx: Context, id: string, body: DraftBody): Promise<Draft> {
  return mutateUnlessDone<Draft>(ctx, async (m, keep) => {
    const stored = await lockDraft(id, m.trx)
    if (stored && !mayHold(stored.body.holder, body.holder)) throw await takenOver(stored, await readDraft(id, m.trx), m.trx)
    await requireMixer(ctx.principal, body.mixedByUserId, stored?.mixedByUserId ?? null, m.trx)
    if (stored && stored.seq >= body.seq) keep(() => readDraft(id, ctx.db))
    if (stored && stored.state !== 'open') throw new Refusal(409, 'already-sealed', 'This batch is in the log already.', [], { current: await readDraft(id, m.trx) })
    const references = await readReferences(body, m.trx)
    refuseImpossible(body, references)
    planOf(references.revision, body.plan, references.scale)
    // Reckoned even before anything reacts, so that a temperature that cannot be is said at once.
    potTimesOf(references.revision, body, m.now)
    const moment = momentOf(body, references.revision, stored, m.now)
    const approved = await checkApprovals(m, id, body, stored, references)
    if (isChoiceOfBooth(body, stored, m.now)) await refuseClash(m, id, body.boothId, references.revision)
    const extras: DraftExtras = { notes: notesOf(body, stored, moment.note), approved }
    const draft = { id, deviceId: deviceOf(ctx, body, stored), reactiveAt: moment.at, body, extras }
    const code = await codeFor(m, ctx, id, body, stored)
    await (stored ? updateDraft(draft, m.now, m.trx) : insertDraft(draft, code, m.now, m.trx))
    await runTimers(m, id, code, body, moment.at, references.revision)
    m.audit({ action: 'draft.saved', subject: `batch:${id}`, facts: auditedFacts(code, body, moment.at, extras) })
    await publishPot(m, id)
    return readDraft(id, m.trx)
  })
}

/**
 * Nothing is poured yet, and the booth or the mix is new, or the booth was not kept for it any more: what is in a cup
 * already is a fact and is not refused, nor is stopping it.
 */
function isChoiceOfBooth({ boothId, mixRevisionId, components, stopped }: DraftBody, stored: StoredDraft | null, now: number): boolean {
  const isEmpty = components.every(({ pours }) => pours.every(({ grams }) => new D(grams).eq(0)))
  if (!isEmpty || stopped !== null) return false
  return stored === null || stored.body.boothId !== boothId || stored.body.mixRevisionId !== mixRevisionId || stored.updatedAt <= now - emptyCupMs
}

/** The device that writes; one that goes on without being enrolled takes the earlier one's name off. */
function deviceOf(ctx: Context, { holder }: DraftBody, stored: StoredDraft | null): string | null {
  const isSame = stored?.body.holder?.id === holder?.id
  return ctx.principal.device?.id ?? (isSame ? stored?.deviceId ?? null : null)
}

/** The code that the batch has, the one that its bench chose, or the next of the series. */
async function codeFor(m: Mutation, ctx: Context, id: string, { code }: DraftBody, stored: StoredDraft | null): Promise<string> {
  if (stored && code !== undefined && code !== stored.code) throw notYours()
  if (stored) return stored.code
  return code === undefined ? takeNumber('batch', m.trx) : claimCode(m, ctx.principal, id, code)
}

interface Moment {
  at: number | null
  note: DraftNote | null
}

/** A measured offset wavers; the stored moment moves only to one that is earlier by more than this, in milliseconds. */
const waverMs = 1000

function momentOf(body: DraftBody, revision: MixRevision, stored: StoredDraft | null, now: number): Moment {
  if (!potLives(revision)) return { at: null, note: null }
  const told = correctedReactiveAt(body, now)
  const shown = reactiveByPours(revision, body, now)
  const earliest = earliestOf(told?.at ?? null, told === null ? shown : null)
  const before = stored?.reactiveAt ?? null
  if (before !== null && (earliest === null || earliest > before - waverMs)) return { at: before, note: null }
  return { at: earliest, note: told?.note ?? null }
}

const earliestOf = (a: number | null, b: number | null): number | null => (a === null || b === null ? (a ?? b) : Math.min(a, b))

function notesOf(body: DraftBody, stored: StoredDraft | null, note: DraftNote | null): DraftNote[] {
  const notes = new Set(stored?.extras.notes ?? [])
  if (note) notes.add(note)
  if (stored && stored.mixedByUserId !== body.mixedByUserId) notes.add('taken-over')
  return [...notes]
}

const lotActions: ReadonlySet<string> = new Set(['use-expired-lot', 'use-blocked-lot'])

/**
 * Holds each new weighing against the rules of its lot. What was weighed a while ago, at a bench without network, has
 * happened and is stored; sealing marks it for a foreman.
 */
async function checkApprovals(
  m: Mutation, id: string, body: DraftBody, stored: StoredDraft | null, { lots, zone }: DraftReferences,
): Promise<DraftExtras['approved']> {
  const approved = [...(stored?.extras.approved ?? [])]
  const offered = [...body.approvals, ...body.corrections.flatMap(({ approvalId }) => approvalId ?? [])]
  const open = await lockOpenApprovals(offered, m.now, m.trx)
  const use = (action: string, subject: string): boolean => {
    if (approved.some((one) => one.action === action && one.subject === subject)) return true
    const fresh = open.find((one) => one.action === action && one.subject === subject)
    if (fresh) approved.push({ approvalId: fresh.id, action, subject })
    return fresh !== undefined
  }
  // A word for a tin is taken when it is given, not when the first gram of it arrives: it lasts for minutes only.
  for (const one of open.filter(({ id: openId, action }) => body.approvals.includes(openId) && lotActions.has(action))) use(one.action, one.subject)
  for (const { path, lotId, at } of newPoursOf(body, stored?.body ?? null)) {
    const lot = lots.get(lotId)
    if (!lot) throw new Error('a lot was lost after it was checked')
    const pouredAt = notAfter(at, m.now)
    for (const fault of lotFaultsOf(lot, shopDate(pouredAt, zone))) {
      const action = approvalActionOf(fault, lot)
      if ((action === null || !use(action, `lot:${lotId}`)) && m.now - pouredAt < factAfterMs) refuseLot(fault, lot, path)
    }
  }
  for (const { approvalId } of body.corrections) {
    if (approvalId !== null && !use('keep-as-poured', `batch:${id}`)) throw ruleBroken('approval-invalid', 'This approval is used, too old, or for something else.')
  }
  const fresh = approved.map(({ approvalId }) => approvalId).filter((approvalId) => open.some((one) => one.id === approvalId))
  await useApprovals(fresh, m.now, m.trx)
  return approved
}

async function runTimers(m: Mutation, id: string, code: string, body: DraftBody, reactiveAt: number | null, revision: MixRevision): Promise<void> {
  const times = potTimesOf(revision, body, reactiveAt)
  if (times) await setPotTimers(m, { batchId: id, boothId: body.boothId, label: potLabel(code, revision), lateAt: times.lateAt, endsAt: times.endsAt })
}

/** What an alarm calls a pot. */
export const potLabel = (code: string, revision: Pick<MixRevision, 'mixName'>): string => `${code} ${revision.mixName}`.slice(0, 160)

function auditedFacts(code: string, body: DraftBody, reactiveAt: number | null, extras: DraftExtras) {
  return {
    code,
    seq: body.seq,
    mixRevisionId: body.mixRevisionId,
    jobStepId: body.jobStepId,
    boothId: body.boothId,
    mixedByUserId: body.mixedByUserId,
    holder: body.holder,
    poured: body.components.flatMap(({ index, pours }) => pours.map(({ lotId, grams, at }) => ({ index, lotId, grams, at }))),
    reactiveAt,
    notes: extras.notes,
    approvals: extras.approved.map(({ approvalId }) => approvalId),
    stopped: body.stopped !== null,
  }
}
