import type { Mix, MixCreateBody, MixPatchBody, MixRevisionBody, MixRevisionFields } from '#shared/schemas/mixes'
import { componentFaults, mixFaults } from '#shared/utils/mix-rules'
import { shareMaterials } from '../repositories/materials'
import { insertMix, insertRevision, lockMix, nextRevisionNumber, updateMix } from '../repositories/mix-edits'
import { componentsOf, findMix, schedulesOf, type StoredMix } from '../repositories/mixes'
import { changesOf } from '../utils/changes'
import { inUse, versionConflict, uniquely } from '../utils/conflict'
import { userIdOf, type Context } from '../utils/context'
import { invalid, notFound } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutate, type Mutation } from '../utils/transactions'
import { mixById } from './mixes'

/** What is told where it is there already. */
const taken = ['code', 'Another mix has this code.'] as const

const wordFields = ['code', 'name'] as const

const answer = (ctx: Context, m: Mutation, id: string): Promise<Mix> => mixById({ ...ctx, db: m.trx }, id)
const tell = (m: Mutation, id: string) => m.publish({ type: 'mix', subject: `mix:${id}`, boothId: null, payload: { id } })

/**
 * Makes a mix with its first revision.
 * @throws Refusal 400 for what the engine or the rules refuse, 409 `duplicate` for a code that is taken
 */
export function createMix(ctx: Context, { code, name, ...fields }: MixCreateBody): Promise<Mix> {
  return mutate(ctx, async (m) => {
    await refuseBroken(fields, m)
    const id = newId()
    await uniquely(...taken, () => insertMix(id, { code, name }, m.now, m.trx))
    const revisionId = await insertRevision(id, 1, fields, userIdOf(ctx.principal), m.now, m.trx)
    m.audit({ action: 'mix.created', subject: `mix:${id}`, facts: { revisionId, number: 1, ...factsOf(fields) } })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

/**
 * Writes the next revision and puts it in force. Those before it never change; drafts and batches keep theirs.
 * @throws Refusal 404, 409 `version-conflict` with what stands now, 400 for what the engine or the rules refuse
 */
export function reviseMix(ctx: Context, id: string, { version, ...fields }: MixRevisionBody): Promise<Mix> {
  return mutate(ctx, async (m) => {
    await lockedMix(ctx, m, id, version)
    await refuseBroken(fields, m)
    const number = await nextRevisionNumber(id, m.trx)
    const revisionId = await insertRevision(id, number, fields, userIdOf(ctx.principal), m.now, m.trx)
    m.audit({ action: 'mix.revised', subject: `mix:${id}`, facts: { revisionId, number, ...factsOf(fields) } })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

/**
 * Renames a mix, or puts it aside and back.
 * @throws Refusal 404, 409 `version-conflict` with what stands now, `duplicate`, or `in-use` while a schedule sprays it, or
 * a material of it is archived or of another role
 */
export function changeMix(ctx: Context, id: string, { version, archived, ...names }: MixPatchBody): Promise<Mix> {
  return mutate(ctx, async (m) => {
    const stored = await lockedMix(ctx, m, id, version)
    if (archived === true && !stored.archived) await refuseArchiving(id, m)
    if (archived === false && stored.archived) await refuseReturn(stored, m)
    await uniquely(...taken, () => updateMix(id, { ...names, archived }, m.now, m.trx))
    m.audit({ action: 'mix.changed', subject: `mix:${id}`, facts: { ...changesOf(stored, names, wordFields), ...(archived === undefined ? {} : { archived }) } })
    tell(m, id)
    return await answer(ctx, m, id)
  })
}

async function lockedMix(ctx: Context, m: Mutation, id: string, version: number): Promise<StoredMix> {
  const stored = await lockMix(id, m.trx) ? await findMix(id, m.trx) : null
  if (!stored) throw notFound('The mix')
  if (stored.version !== version) throw await versionConflict(await answer(ctx, m, id), `mix:${id}`, m.trx)
  return stored
}

async function refuseBroken(fields: MixRevisionFields, m: Mutation): Promise<void> {
  const materials = await shareMaterials(fields.components.map(({ materialId }) => materialId), m.trx)
  const faults = mixFaults(fields, new Map(materials.map(material => [material.id, material])))
  if (faults.length > 0) throw invalid(faults)
}

/** A revision in figures: what it is called and why stays out. */
function factsOf({ potLifeSource: _source, notes: _notes, ...fields }: MixRevisionFields) {
  return { ...fields, components: fields.components.map(component => ({ ...component })), potLifeTable: fields.potLifeTable?.map(row => ({ ...row })) ?? null }
}

async function refuseArchiving(id: string, m: Mutation): Promise<void> {
  const schedules = await schedulesOf(id, m.trx)
  if (schedules.length > 0) throw inUse(`Still sprayed by ${schedules.map(({ code }) => code).join(', ')}. Take it out of there first.`)
}

async function refuseReturn({ currentRevisionId }: StoredMix, m: Mutation): Promise<void> {
  if (currentRevisionId === null) return
  const components = (await componentsOf([currentRevisionId], m.trx)).get(currentRevisionId) ?? []
  const materials = await shareMaterials(components.map(({ materialId }) => materialId), m.trx)
  const archived = materials.filter(material => material.archived)
  if (archived.length > 0) throw inUse(`${archived.map(({ code }) => code).join(', ')} is archived. Bring it back first.`)
  // While the mix was put aside, the role of one of them may have been put right.
  const [fault] = componentFaults(components, new Map(materials.map(material => [material.id, material])))
  if (fault) throw inUse(fault.message)
}
