import { ShopListQuery } from '#shared/schemas/shop'
import { scalesPage } from '../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  query: ShopListQuery,
  handle: ({ ctx, query }) => scalesPage(ctx, query),
})
