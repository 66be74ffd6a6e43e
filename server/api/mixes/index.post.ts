import { MixCreateBody } from '#shared/schemas/mixes'
import { createMix } from '../../services/mix-edits'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'mixes:write',
  status: 201,
  body: MixCreateBody,
  handle: ({ ctx, body }) => createMix(ctx, body),
})
