import { GunBody } from '#shared/schemas/shop-edit'
import { gunKind, createThing } from '../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  body: GunBody,
  status: 201,
  handle: ({ ctx, body }) => createThing(ctx, gunKind, body),
})
