import { IdParams } from '#shared/schemas/common'
import { MixRevisionBody } from '#shared/schemas/mixes'
import { reviseMix } from '../../../services/mix-edits'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'mixes:write',
  status: 201,
  params: IdParams,
  body: MixRevisionBody,
  handle: ({ ctx, params, body }) => reviseMix(ctx, params.id, body),
})
