import { DraftBody, DraftParams } from '#shared/schemas/drafts'
import { saveDraft } from '../../services/drafts'

export default defineRoute({
  permission: 'drafts:write',
  params: DraftParams,
  body: DraftBody,
  handle: ({ ctx, params, body }) => saveDraft(ctx, params.id, body),
})
