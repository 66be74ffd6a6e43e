import { DraftListQuery } from '#shared/schemas/drafts'
import { listDrafts } from '../../services/drafts'

export default defineRoute({
  permission: 'drafts:read',
  query: DraftListQuery,
  handle: ({ ctx, query }) => listDrafts(ctx, query),
})
