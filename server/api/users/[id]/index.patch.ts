import { IdParams } from '#shared/schemas/common'
import { PersonPatchBody } from '#shared/schemas/people'
import { changePerson } from '../../../services/people'

export default defineRoute({
  permission: 'users:write',
  params: IdParams,
  body: PersonPatchBody,
  handle: ({ ctx, params, body }) => changePerson(ctx, params.id, body),
})
