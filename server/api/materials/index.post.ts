import { MaterialCreateBody } from '#shared/schemas/materials'
import { createMaterial } from '../../services/material-edits'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'materials:write',
  status: 201,
  body: MaterialCreateBody,
  handle: ({ ctx, body }) => createMaterial(ctx, body),
})
