import { isoOf, toInstant } from '../utils/rows'
import { defineRoute } from '../utils/handler'

/** The shop's clock, for screens whose own is wrong. */
export default defineRoute({
  permission: 'time:read',
  handle: async ({ ctx }) => ({ now: isoOf(toInstant(await ctx.clock.now(ctx.db))) }),
})
