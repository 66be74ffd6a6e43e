import { describeSession } from '../services/sessions'
import { readDeviceToken, writeDeviceToken } from '../utils/cookies'

export default defineRoute({
  permission: 'public',
  handle({ event, ctx }) {
    const token = readDeviceToken(event)
    if (ctx.principal.device && token) writeDeviceToken(event, token)
    return describeSession(ctx)
  },
})
