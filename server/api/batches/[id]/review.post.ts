import { BatchParams, BatchReviewBody } from '#shared/schemas/batches'
import { settleReview } from '../../../services/reviews'

export default defineRoute({
  permission: 'batches:review',
  params: BatchParams,
  body: BatchReviewBody,
  status: 201,
  handle: ({ ctx, params, body }) => settleReview(ctx, params.id, body),
})
