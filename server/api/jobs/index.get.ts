import { JobListQuery } from '#shared/schemas/jobs'
import { jobsPage } from '../../services/jobs'

export default defineRoute({
  permission: 'jobs:read',
  query: JobListQuery,
  handle: ({ ctx, query }) => jobsPage(ctx, query),
})
