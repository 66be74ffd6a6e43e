import { MixListQuery } from '#shared/schemas/mixes'
import { mixesPage } from '../../services/mixes'

export default defineRoute({
  permission: 'mixes:read',
  query: MixListQuery,
  handle: ({ ctx, query }) => mixesPage(ctx, query),
})
