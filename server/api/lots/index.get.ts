import { LotListQuery } from '#shared/schemas/lots'
import { lotsPage } from '../../services/lots'

export default defineRoute({
  permission: 'lots:read',
  query: LotListQuery,
  handle: ({ ctx, query }) => lotsPage(ctx, query),
})
