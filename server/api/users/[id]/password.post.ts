import { IdParams } from '#shared/schemas/common'
import { PasswordResetBody } from '#shared/schemas/people'
import { resetPassword } from '../../../services/people'

export default defineRoute({
  permission: 'users:write',
  params: IdParams,
  body: PasswordResetBody,
  handle: ({ ctx, params, body }) => resetPassword(ctx, params.id, body),
})
