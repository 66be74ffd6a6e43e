import { IdParams } from '#shared/schemas/common'
import { removeMaterial } from '../../services/material-edits'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'materials:write',
  params: IdParams,
  status: 204,
  handle: ({ ctx, params }) => removeMaterial(ctx, params.id),
})
