import { IdParams } from '#shared/schemas/common'
import { readPerson } from '../../../services/shop'

export default defineRoute({
  permission: 'users:read',
  params: IdParams,
  handle: ({ ctx, params }) => readPerson(ctx, params.id),
})
