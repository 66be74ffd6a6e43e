import { IdParams } from '#shared/schemas/common'
import { readBooth } from '../../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  params: IdParams,
  handle: ({ ctx, params }) => readBooth(ctx, params.id, ctx.db),
})
