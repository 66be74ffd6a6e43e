import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

/** An approval that can be used now. */
export interface OpenApproval {
  id: string
  action: string
  subject: string
}

/** Those of the approvals that are neither used nor expired, locked. */
export async function lockOpenApprovals(ids: readonly string[], now: number, trx: Knex.Transaction): Promise<OpenApproval[]> {
  if (ids.length === 0) return []
  return trx('approvals').whereIn('id', [...ids]).whereNull('used_at').where('expires_at', '>', toInstant(now)).orderBy('id').forUpdate()
    .select<OpenApproval[]>('id', 'action', 'subject')
}

/** An approval serves once. */
export async function useApprovals(ids: readonly string[], now: number, trx: Knex.Transaction): Promise<void> {
  if (ids.length > 0) await trx('approvals').whereIn('id', [...ids]).update({ used_at: toInstant(now) })
}

/** One approval with who gave it, locked; null where it is used, expired or was never given. */
export async function lockApproval(id: string, now: number, trx: Knex.Transaction): Promise<(OpenApproval & { approvedByUserId: string }) | null> {
  const row = await trx('approvals').where({ id }).whereNull('used_at').where('expires_at', '>', toInstant(now)).forUpdate()
    .first<{ id: string, action: string, subject: string, approved_by_user_id: string } | undefined>('*')
  return row ? { id: row.id, action: row.action, subject: row.subject, approvedByUserId: row.approved_by_user_id } : null
}
