import { AnyBody, CalculationParams } from '#shared/schemas/openapi'
import { runCalculation } from '../../services/calculations'

export default defineRoute({
  permission: 'calculations:run',
  params: CalculationParams,
  body: AnyBody,
  idempotent: false,
  handle: ({ params, body }) => runCalculation(params.name, body),
})
