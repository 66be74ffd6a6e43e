import { listDevices } from '../../repositories/devices'

export default defineRoute({
  permission: 'devices:read',
  async handle({ ctx }) {
    return { items: await listDevices(ctx.db), nextCursor: null }
  },
})
