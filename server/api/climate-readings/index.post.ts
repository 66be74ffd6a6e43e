import { ClimateCreateBody } from '#shared/schemas/climate'
import { recordClimate } from '../../services/climate'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'climate:write',
  status: 201,
  body: ClimateCreateBody,
  handle: ({ ctx, body }) => recordClimate(ctx, body),
})
