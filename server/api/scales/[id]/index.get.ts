import { IdParams } from '#shared/schemas/common'
import { readScale } from '../../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  params: IdParams,
  handle: ({ ctx, params }) => readScale(ctx, params.id, ctx.db),
})
