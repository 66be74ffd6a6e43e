import { DeviceParams } from '#shared/schemas/devices'
import { removeDevice } from '../../services/devices'
import { clearDeviceToken } from '../../utils/cookies'

export default defineRoute({
  permission: 'devices:write',
  params: DeviceParams,
  status: 204,
  async handle({ event, ctx, params }) {
    await removeDevice(ctx, params.id)
    if (ctx.principal.device?.id === params.id) clearDeviceToken(event)
  },
})
