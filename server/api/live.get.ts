import { LiveQuery } from '#shared/schemas/live'
import { readLive } from '../services/live'
import { defineRoute } from '../utils/handler'

export default defineRoute({
  permission: 'live:read',
  query: LiveQuery,
  handle: ({ ctx, query }) => readLive(ctx, query.boothId),
})
