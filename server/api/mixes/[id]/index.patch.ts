import { IdParams } from '#shared/schemas/common'
import { MixPatchBody } from '#shared/schemas/mixes'
import { changeMix } from '../../../services/mix-edits'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'mixes:write',
  params: IdParams,
  body: MixPatchBody,
  handle: ({ ctx, params, body }) => changeMix(ctx, params.id, body),
})
