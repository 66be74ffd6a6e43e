import { ShopListQuery } from '#shared/schemas/shop'
import { gunsPage } from '../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  query: ShopListQuery,
  handle: ({ ctx, query }) => gunsPage(ctx, query),
})
