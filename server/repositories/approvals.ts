import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

interface NewApproval {
  id: string
  action: string
  subject: string
  reason: string
  approvedByUserId: string
  now: number
  expiresAt: number
}

export async function insertApproval(approval: NewApproval, db: Knex | Knex.Transaction): Promise<void> {
  await db('approvals').insert({
    id: approval.id,
    action: approval.action,
    subject: approval.subject,
    reason: approval.reason,
    approved_by_user_id: approval.approvedByUserId,
    created_at: toInstant(approval.now),
    expires_at: toInstant(approval.expiresAt),
  })
}
