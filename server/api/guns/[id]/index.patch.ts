import { IdParams } from '#shared/schemas/common'
import { GunPatchBody } from '#shared/schemas/shop-edit'
import { gunKind, changeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  body: GunPatchBody,
  handle: ({ ctx, params, body }) => changeThing(ctx, gunKind, params.id, body),
})
