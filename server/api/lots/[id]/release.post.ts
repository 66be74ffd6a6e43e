import { IdParams } from '#shared/schemas/common'
import { LotReasonBody } from '#shared/schemas/lots'
import { releaseLot } from '../../../services/lot-edits'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'lots:write',
  params: IdParams,
  body: LotReasonBody,
  handle: ({ ctx, params, body }) => releaseLot(ctx, params.id, body),
})
