import { IdParams } from '#shared/schemas/common'
import { ScheduleQuery } from '#shared/schemas/schedules'
import { scheduleById } from '../../services/schedules'

export default defineRoute({
  permission: 'schedules:read',
  params: IdParams,
  query: ScheduleQuery,
  handle: ({ ctx, params, query }) => scheduleById(ctx, params.id, query.revisionId),
})
