import { BatchCreateBody } from '#shared/schemas/batches'
import { sealBatch } from '../../services/batches'

export default defineRoute({
  permission: 'batches:create',
  body: BatchCreateBody,
  status: 201,
  handle: ({ ctx, body }) => sealBatch(ctx, body),
})
