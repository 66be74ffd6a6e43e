import { IdParams } from '#shared/schemas/common'
import { LotMovementBody } from '#shared/schemas/lots'
import { moveLot } from '../../../services/lot-edits'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'lots:write',
  status: 201,
  params: IdParams,
  body: LotMovementBody,
  handle: ({ ctx, params, body }) => moveLot(ctx, params.id, body),
})
