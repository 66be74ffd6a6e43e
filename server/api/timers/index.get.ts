import { TimerListQuery } from '#shared/schemas/timers'
import { readTimers } from '../../services/live'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'timers:read',
  query: TimerListQuery,
  handle: ({ ctx, query }) => readTimers(ctx, query),
})
