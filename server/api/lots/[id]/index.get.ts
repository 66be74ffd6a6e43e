import { IdParams } from '#shared/schemas/common'
import { lotById } from '../../../services/lots'

export default defineRoute({
  permission: 'lots:read',
  params: IdParams,
  handle: ({ ctx, params }) => lotById(ctx, params.id),
})
