import { ScheduleListQuery } from '#shared/schemas/schedules'
import { schedulesPage } from '../../services/schedules'

export default defineRoute({
  permission: 'schedules:read',
  query: ScheduleListQuery,
  handle: ({ ctx, query }) => schedulesPage(ctx, query),
})
