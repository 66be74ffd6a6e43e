import { IdParams } from '#shared/schemas/common'
import { materialById } from '../../services/materials'

export default defineRoute({
  permission: 'materials:read',
  params: IdParams,
  handle: ({ ctx, params }) => materialById(ctx, params.id),
})
