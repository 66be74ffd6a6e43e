import { SignInBody } from '#shared/schemas/session'
import { signIn } from '../services/sessions'
import { randomToken } from '../utils/hash'

export default defineRoute({
  permission: 'public',
  body: SignInBody,
  status: 201,
  idempotent: false,
  async handle({ event, ctx, body }) {
    const token = randomToken()
    const session = await signIn(ctx, body, token)
    await setUserSession(event, { secure: { token } })
    return session
  },
})
