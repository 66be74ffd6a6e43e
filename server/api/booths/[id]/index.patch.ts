import { IdParams } from '#shared/schemas/common'
import { BoothPatchBody } from '#shared/schemas/shop-edit'
import { boothKind, changeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  body: BoothPatchBody,
  handle: ({ ctx, params, body }) => changeThing(ctx, boothKind, params.id, body),
})
