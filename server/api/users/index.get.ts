import { ShopListQuery } from '#shared/schemas/shop'
import { usersPage } from '../../services/shop'

export default defineRoute({
  permission: 'users:read',
  query: ShopListQuery,
  handle: ({ ctx, query }) => usersPage(ctx, query),
})
