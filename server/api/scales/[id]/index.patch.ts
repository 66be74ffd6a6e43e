import { IdParams } from '#shared/schemas/common'
import { ScalePatchBody } from '#shared/schemas/shop-edit'
import { scaleKind, changeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  body: ScalePatchBody,
  handle: ({ ctx, params, body }) => changeThing(ctx, scaleKind, params.id, body),
})
