import { MaterialListQuery } from '#shared/schemas/materials'
import { materialsPage } from '../../services/materials'

export default defineRoute({
  permission: 'materials:read',
  query: MaterialListQuery,
  handle: ({ ctx, query }) => materialsPage(ctx, query),
})
