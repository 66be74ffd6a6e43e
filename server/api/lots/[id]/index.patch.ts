import { IdParams } from '#shared/schemas/common'
import { LotPatchBody } from '#shared/schemas/lots'
import { correctLot } from '../../../services/lot-edits'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'lots:write',
  params: IdParams,
  body: LotPatchBody,
  handle: ({ ctx, params, body }) => correctLot(ctx, params.id, body),
})
