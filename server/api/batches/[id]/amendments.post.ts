import { AmendmentBody } from '#shared/schemas/amendments'
import { BatchParams } from '#shared/schemas/batches'
import { amendBatch } from '../../../services/amendments'

export default defineRoute({
  permission: 'batches:amend',
  params: BatchParams,
  body: AmendmentBody,
  status: 201,
  handle: ({ ctx, params, body }) => amendBatch(ctx, params.id, body),
})
