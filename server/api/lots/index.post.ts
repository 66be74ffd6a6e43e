import { LotCreateBody } from '#shared/schemas/lots'
import { bookIn } from '../../services/lot-edits'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'lots:create',
  status: 201,
  body: LotCreateBody,
  handle: ({ ctx, body }) => bookIn(ctx, body),
})
