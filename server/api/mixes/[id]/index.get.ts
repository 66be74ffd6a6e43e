import { IdParams } from '#shared/schemas/common'
import { MixQuery } from '#shared/schemas/mixes'
import { mixById } from '../../../services/mixes'

export default defineRoute({
  permission: 'mixes:read',
  params: IdParams,
  query: MixQuery,
  handle: ({ ctx, params, query }) => mixById(ctx, params.id, query.revisionId),
})
