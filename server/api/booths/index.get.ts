import { ShopListQuery } from '#shared/schemas/shop'
import { boothsPage } from '../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  query: ShopListQuery,
  handle: ({ ctx, query }) => boothsPage(ctx, query),
})
