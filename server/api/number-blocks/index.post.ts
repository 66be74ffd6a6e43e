import { takeBlock } from '../../services/number-blocks'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'numbers:take',
  status: 201,
  handle: ({ ctx }) => takeBlock(ctx),
})
