import { readBench } from '../../services/bench'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'bench:read',
  handle: ({ ctx }) => readBench(ctx),
})
