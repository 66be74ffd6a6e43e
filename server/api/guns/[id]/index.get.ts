import { IdParams } from '#shared/schemas/common'
import { readGun } from '../../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  params: IdParams,
  handle: ({ ctx, params }) => readGun(ctx, params.id, ctx.db),
})
