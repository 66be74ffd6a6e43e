import { batchFacets } from '../../services/batch-log'

export default defineRoute({
  permission: 'batches:search',
  handle: ({ ctx }) => batchFacets(ctx),
})
