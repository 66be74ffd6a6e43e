import { IdParams } from '#shared/schemas/common'
import { TimerActionBody } from '#shared/schemas/timers'
import { acknowledgeTimer } from '../../../services/timers'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'timers:acknowledge',
  params: IdParams,
  body: TimerActionBody,
  handle: ({ ctx, params }) => acknowledgeTimer(ctx, params.id),
})
