import { BatchListQuery } from '#shared/schemas/batches'
import { listBatches } from '../../services/batch-log'

export default defineRoute({
  permission: 'batches:read',
  query: BatchListQuery,
  handle: ({ ctx, query }) => listBatches(ctx, query),
})
