import { BatchEventBody, BatchParams } from '#shared/schemas/batches'
import { recordBatchEvent } from '../../../services/batch-events'

export default defineRoute({
  permission: 'batches:event',
  params: BatchParams,
  body: BatchEventBody,
  status: 201,
  handle: ({ ctx, params, body }) => recordBatchEvent(ctx, params.id, body),
})
