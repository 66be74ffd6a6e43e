import { D, HUNDRED, print } from '#shared/engine/decimal'
import { EngineError } from '#shared/engine/error'
import { readMix, shareOf, type Mix as EngineMix, type MixInput } from '#shared/engine/mix'
import { line, type WorkingLine } from '#shared/engine/working'
import type { Mix, MixComponent, MixItem, MixListQuery, MixRevision } from '#shared/schemas/mixes'
import { findMix, findRevisions, listMixes, listRevisions, schedulesOf, type StoredComponent, type StoredRevision } from '../repositories/mixes'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
import { pageOf, readCursor, type Page } from './paging'

/** A page of mixes by code. */
export async function mixesPage(ctx: Context, query: MixListQuery): Promise<Page<MixItem>> {
  const [after = null] = readCursor(query.cursor, ['text']) ?? []
  return pageOf(await listMixes(query, { after, limit: query.limit + 1 }, ctx.db), query.limit, last => [last.code])
}

/**
 * A mix with its current revision worked out, and all revisions it ever had.
 * @param revisionId of another revision to show beside the one in force
 * @throws Refusal 404 when there is none, or the revision is of another mix
 */
export async function mixById(ctx: Context, id: string, revisionId?: string): Promise<Mix> {
  const mix = await findMix(id, ctx.db)
  if (!mix) throw notFound('The mix')
  const wanted = [...new Set([mix.currentRevisionId, revisionId].filter(one => one !== null && one !== undefined))]
  const [found, revisions, schedules] = await Promise.all([
    findRevisions(wanted, ctx.db),
    listRevisions(id, ctx.db),
    schedulesOf(id, ctx.db),
  ])
  const { currentRevisionId, ...head } = mix
  const described = (wantedId: string | null): MixRevision | null => {
    const revision = found.find(one => one.id === wantedId && one.mixId === id)
    return revision ? describeRevision(revision) : null
  }
  const current = described(currentRevisionId)
  const shown = revisionId === undefined ? current : described(revisionId)
  if (revisionId !== undefined && !shown) throw notFound('The revision')
  return { ...head, current, shown, revisions, schedules }
}

/** A stored revision as the engine takes it. */
export function engineMix(revision: Pick<StoredRevision, 'basis' | 'components'>): MixInput {
  return {
    basis: revision.basis,
    components: revision.components.map(component => ({
      name: component.materialCode,
      parts: component.parts,
      partsMax: component.partsMax ?? undefined,
      densityGPerMl: component.densityGPerMl ?? undefined,
      role: component.role,
      tolerancePct: component.tolerancePct ?? undefined,
      reactive: component.reactive,
    })),
  }
}

/** The mix as the engine reads it, or null where the record lacks what it needs, such as a density. */
export function tryMix(revision: Pick<StoredRevision, 'basis' | 'components'>): EngineMix | null {
  try {
    return readMix(engineMix(revision))
  }
  catch (error) {
    if (error instanceof EngineError) return null
    throw error
  }
}

/** The density of a revision as mixed, g/mL: the sheet's own, else by adding volumes. */
export function densityOf(revision: StoredRevision, mix: EngineMix | null): string | null {
  return revision.densityGPerMl ?? (mix?.densityGPerMl ? print(mix.densityGPerMl) : null)
}

/** A revision with shares, tolerances in force, density and late limit. */
function describeRevision(revision: StoredRevision): MixRevision {
  const mix = tryMix(revision)
  const late = revision.potLifeMin === null ? null : new D(revision.potLifeMin).times(revision.lateFromPct).div(HUNDRED)
  const densityGPerMl = densityOf(revision, mix)
  return {
    ...revision,
    densityGPerMl,
    densityIs: revision.densityGPerMl !== null ? 'given' : densityGPerMl === null ? null : 'worked-out',
    lateAfterMin: late === null ? null : print(late),
    components: revision.components.map(component => describeComponent(component, mix)),
    working: [
      ...(mix ? mixWorking(mix, revision.densityGPerMl === null) : []),
      ...(late === null ? [] : [line('late from', `${revision.potLifeMin} min × ${revision.lateFromPct} %`, late, 'min')]),
    ],
  }
}

function describeComponent(component: StoredComponent, mix: EngineMix | null): MixComponent {
  const read = mix?.components[component.index]
  return {
    ...component,
    tolerancePct: component.tolerancePct ?? (read ? print(read.tolerancePct) : null),
    toleranceGiven: component.tolerancePct !== null,
    sharePct: mix && read ? print(shareOf(mix, read).times(HUNDRED)) : null,
  }
}

function mixWorking(mix: EngineMix, withDensity: boolean): WorkingLine[] {
  const weightParts = mix.basis === 'volume'
    ? mix.components.map(part =>
        line(`${part.name}, parts by weight`, `${print(part.parts)} × ${part.densityGPerMl ? print(part.densityGPerMl) : '?'} g/mL`, part.weightParts, 'parts'))
    : []
  const shares = mix.components.map(part =>
    line(`${part.name}, share`, `${print(part.weightParts)} ÷ ${print(mix.totalWeightParts)}`, shareOf(mix, part).times(HUNDRED), '%'))
  if (!withDensity || mix.densityGPerMl === null) return [...weightParts, ...shares]
  const volumes = mix.components.map(part => `${print(part.weightParts)} ÷ ${part.densityGPerMl ? print(part.densityGPerMl) : '?'}`)
  return [
    ...weightParts, ...shares,
    line('density of the mix, volumes taken to add up', `${print(mix.totalWeightParts)} ÷ (${volumes.join(' + ')})`, mix.densityGPerMl, 'g/mL'),
  ]
}
