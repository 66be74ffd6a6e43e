import { ShopListQuery } from '#shared/schemas/shop'
import { mixingCupsPage } from '../../services/shop'

export default defineRoute({
  permission: 'shop:read',
  query: ShopListQuery,
  handle: ({ ctx, query }) => mixingCupsPage(ctx, query),
})
