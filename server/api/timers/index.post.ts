import { TimerCreateBody } from '#shared/schemas/timers'
import { createTimer } from '../../services/timers'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'timers:create',
  status: 201,
  body: TimerCreateBody,
  handle: ({ ctx, body }) => createTimer(ctx, body),
})
