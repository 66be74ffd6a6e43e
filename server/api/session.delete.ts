import { signOut } from '../services/sessions'

export default defineRoute({
  permission: 'public',
  status: 204,
  async handle({ event, ctx }) {
    await signOut(ctx)
    await clearUserSession(event)
  },
})
