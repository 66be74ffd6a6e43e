import { IdParams } from '#shared/schemas/common'
import { BoothExtractionBody } from '#shared/schemas/shop'
import { setExtraction } from '../../../services/booth-air'

export default defineRoute({
  permission: 'booths:extraction',
  params: IdParams,
  body: BoothExtractionBody,
  handle: ({ ctx, params, body }) => setExtraction(ctx, params.id, body),
})
