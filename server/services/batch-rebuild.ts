import { isCurrent, lockCurrent, rewriteCurrent } from '../repositories/batch-current'
import { batchIdsAfter, readRecord } from '../repositories/batch-record'
import { rewriteUses } from '../repositories/batch-uses'
import type { Context } from '../utils/context'
import { mutate } from '../utils/transactions'
import { usedIdsOf } from './amendments'
import { effectiveOf } from './batch-effective'
import { rewriteCoats } from './coat-amendments'

const page = 200

/** How many batches were looked at, and which of them did not say what their record says. */
export interface Rebuilt {
  batches: number
  changed: string[]
}

/**
 * Makes the present state of every batch anew from its record, a page in a transaction. Where all is well it changes
 * nothing but the index of what batches hold.
 */
export async function rebuildBatches(ctx: Context): Promise<Rebuilt> {
  const rebuilt: Rebuilt = { batches: 0, changed: [] }
  for (let last = ''; ;) {
    const ids = await batchIdsAfter(last, page, ctx.db)
    if (ids.length === 0) return rebuilt
    const changed = await rebuildPage(ctx, ids)
    rebuilt.batches += ids.length
    rebuilt.changed.push(...changed)
    last = ids.at(-1) ?? last
  }
}

function rebuildPage(ctx: Context, ids: readonly string[]): Promise<string[]> {
  return mutate(ctx, async (m) => {
    const changed: string[] = []
    for (const id of ids) {
      const record = (await lockCurrent(id, m.trx)) && (await readRecord(id, m.trx))
      if (!record) continue
      const effective = effectiveOf(record, m.now)
      const isRight = await isCurrent(effective.current, m.trx)
      if (!isRight) await rewriteCurrent(effective.current, m.now, m.trx)
      const coats = await rewriteCoats(m, record, effective)
      if (!isRight || coats.length > 0) changed.push(id)
      await rewriteUses({ batchId: id, mixedAt: record.mixedAt, usedIds: usedIdsOf(record, effective) }, m.trx)
    }
    m.audit({ action: 'batches.rebuilt', subject: 'settings:shop', facts: { from: ids[0] ?? null, to: ids.at(-1) ?? null, changed } })
    return changed
  })
}
