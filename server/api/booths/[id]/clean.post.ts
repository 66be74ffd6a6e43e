import { BoothCleanBody } from '#shared/schemas/booth-cleanings'
import { IdParams } from '#shared/schemas/common'
import { cleanBooth } from '../../../services/booth-guard'

export default defineRoute({
  permission: 'booths:clean',
  params: IdParams,
  body: BoothCleanBody,
  status: 201,
  handle: ({ ctx, params, body }) => cleanBooth(ctx, params.id, body),
})
