import { BoothBody } from '#shared/schemas/shop-edit'
import { boothKind, createThing } from '../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  body: BoothBody,
  status: 201,
  handle: ({ ctx, body }) => createThing(ctx, boothKind, body),
})
