import { PersonCreateBody } from '#shared/schemas/people'
import { createPerson } from '../../services/people'

export default defineRoute({
  permission: 'users:write',
  body: PersonCreateBody,
  status: 201,
  handle: ({ ctx, body }) => createPerson(ctx, body),
})
