import { BatchCloseBody, BatchParams } from '#shared/schemas/batches'
import { closeBatch } from '../../../services/batch-close'

export default defineRoute({
  permission: 'batches:close',
  params: BatchParams,
  body: BatchCloseBody,
  handle: ({ ctx, params, body }) => closeBatch(ctx, params.id, body),
})
