import { IdParams } from '#shared/schemas/common'
import { mixingCupKind, removeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  status: 204,
  handle: ({ ctx, params }) => removeThing(ctx, mixingCupKind, params.id),
})
