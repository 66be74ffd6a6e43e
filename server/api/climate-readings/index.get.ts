import { ClimateListQuery } from '#shared/schemas/climate'
import { listClimate } from '../../services/climate'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'climate:read',
  query: ClimateListQuery,
  handle: ({ ctx, query }) => listClimate(ctx, query),
})
