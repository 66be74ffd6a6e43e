import { IdParams } from '#shared/schemas/common'
import { boothChemistry } from '../../../services/booth-guard'

export default defineRoute({
  permission: 'shop:read',
  params: IdParams,
  handle: ({ ctx, params }) => boothChemistry(ctx, params.id),
})
