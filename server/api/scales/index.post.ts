import { ScaleBody } from '#shared/schemas/shop-edit'
import { scaleKind, createThing } from '../../services/shop-edit'

export default defineRoute({
  permission: 'shop:write',
  body: ScaleBody,
  status: 201,
  handle: ({ ctx, body }) => createThing(ctx, scaleKind, body),
})
