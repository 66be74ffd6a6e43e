import { BatchParams } from '#shared/schemas/batches'
import { getBatch } from '../../../services/batches'

export default defineRoute({
  permission: 'batches:read',
  params: BatchParams,
  handle: ({ ctx, params }) => getBatch(ctx, params.id),
})
