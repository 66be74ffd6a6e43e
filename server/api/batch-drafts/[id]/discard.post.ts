import { DraftDiscardBody, DraftParams } from '#shared/schemas/drafts'
import { discardDraft } from '../../../services/draft-discard'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'drafts:write',
  params: DraftParams,
  body: DraftDiscardBody,
  handle: ({ ctx, params, body }) => discardDraft(ctx, params.id, body),
})
