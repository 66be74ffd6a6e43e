import { IdParams } from '#shared/schemas/common'
import { TimerSilenceBody } from '#shared/schemas/timers'
import { silenceTimer } from '../../../services/timers'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'timers:silence',
  params: IdParams,
  body: TimerSilenceBody,
  handle: ({ ctx, params, body }) => silenceTimer(ctx, params.id, body),
})
