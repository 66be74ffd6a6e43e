import { IdParams } from '#shared/schemas/common'
import { readMixingCup } from '../../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  params: IdParams,
  handle: ({ ctx, params }) => readMixingCup(ctx, params.id, ctx.db),
})
