import { IdParams } from '#shared/schemas/common'
import { jobById } from '../../services/jobs'

export default defineRoute({
  permission: 'jobs:read',
  params: IdParams,
  handle: ({ ctx, params }) => jobById(ctx, params.id),
})
