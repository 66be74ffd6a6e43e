import { IdParams } from '#shared/schemas/common'
import { NumberBlockVoidBody } from '#shared/schemas/number-blocks'
import { voidBlock } from '../../../services/number-blocks'
import { defineRoute } from '../../../utils/handler'

export default defineRoute({
  permission: 'numbers:void',
  params: IdParams,
  body: NumberBlockVoidBody,
  handle: ({ ctx, params, body }) => voidBlock(ctx, params.id, body),
})
