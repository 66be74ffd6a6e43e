import { readSettings } from '../../repositories/settings'

export default defineRoute({
  permission: 'settings:read',
  handle: ({ ctx }) => readSettings(ctx.db),
})
