import { IdParams } from '#shared/schemas/common'
import { scaleKind, removeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  status: 204,
  handle: ({ ctx, params }) => removeThing(ctx, scaleKind, params.id),
})
