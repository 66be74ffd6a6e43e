import type { Material, MaterialCreateBody, MaterialFields, MaterialPatchBody } from '#shared/schemas/materials'
import { materialFaults } from '#shared/utils/material-rules'
import {
  deleteMaterial, hazardTexts, insertMaterial, isReferenced, lockMaterial, updateMaterial, usesOf, volumeMixesOf, type StoredMaterial,
} from '../repositories/materials'
import { changesOf } from '../utils/changes'
import { inUse, versionConflict, uniquely } from '../utils/conflict'
import type { Context } from '../utils/context'
import { invalid, notFound, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutate, type Mutation } from '../utils/transactions'
import { materialById } from './materials'

/** What is told where it is there already. */
const taken = ['code', 'Another material has this code.'] as const

/** Words and codes stay out of the audit: they may name people or firms. */
const wordFields = ['code', 'name', 'supplier', 'makerCode', 'protectionMixing', 'protectionSpraying'] as const

const inside = (ctx: Context, { trx }: Mutation): Context => ({ ...ctx, db: trx })
const tell = (m: Mutation, id: string) => m.publish({ type: 'material', subject: `material:${id}`, boothId: null, payload: { id } })

/**
 * Enters a material.
 * @throws Refusal 400 for a statement that is not known, 409 `duplicate` for a code that is taken
 */
export function createMaterial(ctx: Context, body: MaterialCreateBody): Promise<Material> {
  return mutate(ctx, async (m) => {
    const id = newId()
    await refuseUnknownStatements(body.hazardCodes, m)
    await uniquely(...taken, () => insertMaterial(id, body, m.now, m.trx))
    m.audit({ action: 'material.created', subject: `material:${id}`, facts: changesOf({}, body, wordFields) })
    tell(m, id)
    return await materialById(inside(ctx, m), id)
  })
}

/**
 * Changes a material, or puts it aside and back.
 * @throws Refusal 404, 409 `version-conflict` with what stands now, 409 `duplicate`, 409 `in-use` when a mix still takes it,
 * 422 `density-needed` when a mix by volume does, 422 `role-in-use` for another role while a mix takes it, 400 for what its figures say against each other
 */
export function changeMaterial(ctx: Context, id: string, { version, archived, ...fields }: MaterialPatchBody): Promise<Material> {
  return mutate(ctx, async (m) => {
    const stored = await lockMaterial(id, m.trx)
    if (!stored) throw notFound('The material')
    if (stored.version !== version) throw await versionConflict(await materialById(inside(ctx, m), id), `material:${id}`, m.trx)
    await refuseBroken(stored, fields, m)
    if (fields.role !== undefined && fields.role !== stored.role) await refuseOtherRole(id, m)
    if (archived && !stored.archived) await refuseArchiving(id, m)
    await uniquely(...taken, () => updateMaterial(id, fields, archived, m.now, m.trx))
    m.audit({ action: 'material.changed', subject: `material:${id}`, facts: { ...changesOf(stored, fields, wordFields), ...(archived === undefined ? {} : { archived }) } })
    tell(m, id)
    return await materialById(inside(ctx, m), id)
  })
}

/**
 * Takes away a material that nothing ever referred to.
 * @throws Refusal 404, 409 `in-use`
 */
export async function removeMaterial(ctx: Context, id: string): Promise<void> {
  await mutate(ctx, async (m) => {
    if (!(await lockMaterial(id, m.trx))) throw notFound('The material')
    if (await isReferenced(id, m.trx)) throw inUse('Lots or mixes refer to this material, so it stays in the record. Archive it instead.')
    await deleteMaterial(id, m.trx)
    m.audit({ action: 'material.removed', subject: `material:${id}`, facts: {} })
    tell(m, id)
    return null
  })
}

async function refuseBroken(stored: StoredMaterial, fields: Partial<MaterialFields>, m: Mutation): Promise<void> {
  const faults = materialFaults({ ...stored, ...fields })
  if (faults.length > 0) throw invalid(faults)
  if (fields.hazardCodes) await refuseUnknownStatements(fields.hazardCodes, m)
  if (fields.densityGPerMl !== null || stored.densityGPerMl === null) return
  const codes = await volumeMixesOf(stored.id, m.trx)
  if (codes.length === 0) return
  const message = `Mixed by volume in ${codes.join(', ')}: its density must be known.`
  throw ruleBroken('density-needed', message, [{ path: 'densityGPerMl', message }])
}

/** The pouring order of a mix in force hangs on the roles of its materials. */
async function refuseOtherRole(id: string, m: Mutation): Promise<void> {
  const codes = await mixesWith(id, m)
  if (codes.length === 0) return
  const message = `Taken by ${codes.join(', ')} in this role. Make a new revision without it or archive the mix first.`
  throw ruleBroken('role-in-use', message, [{ path: 'role', message }])
}

/** Codes of the mixes in force that take a material, each once. */
const mixesWith = async (id: string, m: Mutation): Promise<string[]> => [...new Set((await usesOf(id, m.trx)).map(({ mixCode }) => mixCode))]

async function refuseArchiving(id: string, m: Mutation): Promise<void> {
  const codes = await mixesWith(id, m)
  if (codes.length === 0) return
  throw inUse(`Still taken by ${codes.join(', ')}. Make a new revision without it or archive the mix first.`)
}

async function refuseUnknownStatements(codes: readonly string[], m: Mutation): Promise<void> {
  const known = new Set((await hazardTexts(codes, m.trx)).map(({ code }) => code))
  const unknown = codes.filter(code => !known.has(code))
  if (unknown.length > 0) throw invalid([{ path: 'hazardCodes', message: 'One of these statements is not in the list.' }])
}
