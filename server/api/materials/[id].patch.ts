import { IdParams } from '#shared/schemas/common'
import { MaterialPatchBody } from '#shared/schemas/materials'
import { changeMaterial } from '../../services/material-edits'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'materials:write',
  params: IdParams,
  body: MaterialPatchBody,
  handle: ({ ctx, params, body }) => changeMaterial(ctx, params.id, body),
})
