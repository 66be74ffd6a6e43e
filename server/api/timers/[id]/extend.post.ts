import { IdParams } from '#shared/schemas/common'
import { TimerExtendBody } from '#shared/schemas/timers'
import { extendTimer } from '../../../services/timers'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'timers:create',
  params: IdParams,
  body: TimerExtendBody,
  handle: ({ ctx, params, body }) => extendTimer(ctx, params.id, body),
})
