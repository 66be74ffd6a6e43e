import { IdParams } from '#shared/schemas/common'
import { MixingCupPatchBody } from '#shared/schemas/shop-edit'
import { mixingCupKind, changeThing } from '../../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  params: IdParams,
  body: MixingCupPatchBody,
  handle: ({ ctx, params, body }) => changeThing(ctx, mixingCupKind, params.id, body),
})
