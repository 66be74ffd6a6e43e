import { IdParams } from '#shared/schemas/common'
import { TimerActionBody } from '#shared/schemas/timers'
import { finishTimer } from '../../../services/timers'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'timers:acknowledge',
  params: IdParams,
  body: TimerActionBody,
  handle: ({ ctx, params }) => finishTimer(ctx, params.id),
})
