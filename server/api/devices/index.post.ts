import { DeviceCreateBody } from '#shared/schemas/devices'
import { enrolDevice } from '../../services/devices'
import { writeDeviceToken } from '../../utils/cookies'
import { deviceTokenFor } from '../../utils/device-token'

export default defineRoute({
  permission: 'devices:write',
  body: DeviceCreateBody,
  status: 201,
  async handle({ event, ctx, body }) {
    const token = deviceTokenFor(ctx)
    const device = await enrolDevice(ctx, body, token)
    writeDeviceToken(event, token)
    return device
  },
})
