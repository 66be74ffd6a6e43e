import { OwnPasswordBody } from '#shared/schemas/people'
import { changeOwnPassword } from '../../services/sessions'
import { randomToken } from '../../utils/hash'

export default defineRoute({
  permission: 'password:change',
  body: OwnPasswordBody,
  idempotent: false,
  async handle({ event, ctx, body }) {
    const token = randomToken()
    const session = await changeOwnPassword(ctx, body, token)
    await setUserSession(event, { secure: { token } })
    return session
  },
})
