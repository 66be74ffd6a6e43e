import { MixingCupBody } from '#shared/schemas/shop-edit'
import { mixingCupKind, createThing } from '../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  body: MixingCupBody,
  status: 201,
  handle: ({ ctx, body }) => createThing(ctx, mixingCupKind, body),
})
