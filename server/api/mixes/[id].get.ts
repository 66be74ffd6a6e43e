import { IdParams } from '#shared/schemas/common'
import { mixById } from '../../services/mixes'

export default defineRoute({
  permission: 'mixes:read',
  params: IdParams,
  handle: ({ ctx, params }) => mixById(ctx, params.id),
})
