import { ApprovalBody } from '#shared/schemas/session'
import { approve } from '../../services/sessions'

export default defineRoute({
  permission: 'approvals:create',
  body: ApprovalBody,
  status: 201,
  handle: ({ ctx, body }) => approve(ctx, body),
})
