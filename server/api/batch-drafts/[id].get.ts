import { DraftParams } from '#shared/schemas/drafts'
import { getDraft } from '../../services/drafts'

export default defineRoute({
  permission: 'drafts:read',
  params: DraftParams,
  handle: ({ ctx, params }) => getDraft(ctx, params.id),
})
