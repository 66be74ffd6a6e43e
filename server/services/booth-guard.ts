import type { Knex } from 'knex'
import type { ChemistryRule } from '#shared/engine/chemistry-clash'
import type { BoothChemistry, BoothCleanBody, BoothPast } from '#shared/schemas/booth-cleanings'
import { begunWords, boothClash, clashWords, type BoothClash } from '#shared/utils/bench-booth'
import {
  chemistriesOf, cleaningsAround, findBoothName, insertCleaning, lastCleaning, listBoothRules, mixesBegunFor, mixesInBooth, type BoothMix,
} from '../repositories/booth-cleanings'
import { lockBooths, shareBooth } from '../repositories/booth-locks'
import type { MixRevision } from '../repositories/mix-revisions'
import { lockApproval, useApprovals } from '../repositories/used-approvals'
import type { Context } from '../utils/context'
import { notFound, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { isoOf, toInstant } from '../utils/rows'
import { mutate, type Mutation } from '../utils/transactions'

type Db = Knex | Knex.Transaction

/** What lies in a booth since it was last recorded clean. @throws Refusal 404 */
export async function boothChemistry(ctx: Context, id: string): Promise<BoothChemistry> {
  return await readChemistry(id, await ctx.clock.now(ctx.db), ctx.db)
}

async function readChemistry(boothId: string, now: number, db: Db): Promise<BoothChemistry> {
  const boothName = await findBoothName(boothId, db)
  if (boothName === null) throw notFound('The booth')
  return { boothId, boothName, ...await boothPast(boothId, now, db) }
}

/** Chemistries in a booth, its duct and filters at an instant, the latest first, and when it was last recorded clean. */
export async function boothPast(boothId: string, now: number, db: Db): Promise<Pick<BoothChemistry, 'past' | 'cleanedAt' | 'cleanedByName'>> {
  const cleaning = await lastCleaning(boothId, now, db)
  const past = await pastOf(await mixesInBooth(boothId, cleaning?.at ?? null, null, db), db)
  return { past, cleanedAt: cleaning === null ? null : isoOf(toInstant(cleaning.at)), cleanedByName: cleaning?.userName ?? null }
}

async function pastOf(mixes: readonly BoothMix[], db: Db): Promise<BoothPast[]> {
  const at = new Map<string, number>()
  for (const mix of mixes) at.set(mix.mixRevisionId, Math.max(at.get(mix.mixRevisionId) ?? 0, mix.at))
  const latest = new Map<string, { mixName: string, at: number }>()
  for (const { mixRevisionId, mixName, chemistry } of await chemistriesOf([...at.keys()], db)) {
    const then = at.get(mixRevisionId) ?? 0
    if (then >= (latest.get(chemistry)?.at ?? 0)) latest.set(chemistry, { mixName, at: then })
  }
  return [...latest].map(([chemistry, one]) => ({ chemistry, mixName: one.mixName, at: isoOf(toInstant(one.at)) }))
    .sort((a, b) => b.at.localeCompare(a.at))
}

const chemistriesOfMix = ({ components }: Pick<MixRevision, 'components'>): string[] => components.map(({ chemistry }) => chemistry)

/**
 * Holds a booth against what the mix must not meet there: of two mixes that a rule keeps apart, the one that stands first
 * in it has the booth for itself, and all others share it. So clashing pots follow each other and the rest do not wait.
 */
async function holdBooth(boothId: string, revision: MixRevision, rules: readonly ChemistryRule[], { trx }: Mutation): Promise<void> {
  const own = chemistriesOfMix(revision)
  const isFirst = rules.some(({ first, verdict }) => verdict === 'blocked' && own.includes(first))
  await (isFirst ? lockBooths([boothId], trx) : shareBooth(boothId, trx))
}

/**
 * Refuses to begin a mix for a booth that holds what it must not meet, or for which such a pot is being mixed. Nobody
 * approves that: the booth is cleaned and recorded clean, or another booth is taken.
 *
 * @throws Refusal 422 `booth-clash`
 */
export async function refuseClash(m: Mutation, draftId: string, boothId: string | null, revision: MixRevision): Promise<void> {
  if (boothId === null) return
  const rules = await listBoothRules(m.trx)
  await holdBooth(boothId, revision, rules, m)
  const { boothName, past } = await readChemistry(boothId, m.now, m.trx)
  const clash = boothClash(chemistriesOfMix(revision), past, rules)
  if (clash?.verdict === 'blocked') throw clashing(clashWords(clash, boothName))
  const begun = boothClash(chemistriesOfMix(revision), await pastOf(await mixesBegunFor(boothId, draftId, m.now, m.trx), m.trx), rules)
  if (begun?.verdict === 'blocked') throw clashing(begunWords(begun, boothName))
}

function clashing(message: string) {
  return ruleBroken('booth-clash', message, [{ path: 'boothId', message }])
}

/**
 * The blocked clash of a batch that is in the cup already, with what was made for its booth between the same two cleanings.
 * A mix that no rule keeps apart from anything looks at no booth: its own row shares the booth once it is written.
 */
export async function clashAt(m: Mutation, boothId: string | null, revision: MixRevision, mixedAt: number): Promise<BoothClash | null> {
  if (boothId === null) return null
  const { trx: db } = m
  const own = chemistriesOfMix(revision)
  const rules = await listBoothRules(db, own)
  if (rules.length === 0) return null
  await holdBooth(boothId, revision, rules, m)
  const { last, next } = await cleaningsAround(boothId, mixedAt, db)
  return boothClash(own, await pastOf(await mixesInBooth(boothId, last, next, db), db), rules)
}

/**
 * Records booth, duct and filters as clean: what was sprayed before no longer stands in the way. A foreman or manager
 * does it signed in, or gives a sprayer's bench the word for it.
 *
 * @throws Refusal 404, 422 `foreman-needed` without a foreman, `approval-invalid` for a word that is used, old or for something else
 */
export function cleanBooth(ctx: Context, id: string, { approvalId }: BoothCleanBody): Promise<BoothChemistry> {
  return mutate(ctx, async (m) => {
    const userId = await cleanedBy(ctx, m, id, approvalId)
    await lockBooths([id], m.trx)
    const before = await readChemistry(id, m.now, m.trx)
    const cleaningId = newId()
    await insertCleaning({ id: cleaningId, boothId: id, userId, at: m.now }, m.trx)
    m.audit({
      action: 'booth.cleaned', subject: `booth:${id}`,
      facts: { cleaningId, cleanedByUserId: userId, approvalId, chemistries: before.past.map(({ chemistry }) => chemistry), before: before.cleanedAt },
    })
    return await readChemistry(id, m.now, m.trx)
  })
}

/** Who answers for it: the senior who is signed in, or the one whose word a bench brings. */
async function cleanedBy(ctx: Context, m: Mutation, boothId: string, approvalId: string | null): Promise<string> {
  const { user } = ctx.principal
  if (approvalId === null) {
    if (user && user.role !== 'sprayer') return user.id
    throw ruleBroken('foreman-needed', 'A foreman has to record a booth as clean.')
  }
  const approval = await lockApproval(approvalId, m.now, m.trx)
  if (approval?.action !== 'clean-booth' || approval.subject !== `booth:${boothId}`) {
    throw ruleBroken('approval-invalid', 'This approval is used, too old, or for something else.')
  }
  await useApprovals([approvalId], m.now, m.trx)
  return approval.approvedByUserId
}
