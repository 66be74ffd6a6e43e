import * as z from 'zod/mini'
import { findCalculation } from '#shared/schemas/calculations'
import { invalid, notFound } from '../utils/errors'

/**
 * Runs a calculation of the engine by its name.
 * @throws Refusal 404 for an unknown name, 400 for a body of another shape; EngineError for what cannot be true
 */
export function runCalculation(name: string, body: unknown): unknown {
  const calculation = findCalculation(name)
  if (!calculation) throw notFound('This calculation')
  const parsed = z.safeParse(calculation.body, body ?? {})
  if (parsed.success) return calculation.run(parsed.data)
  throw invalid(parsed.error.issues.map(issue => ({
    path: issue.path.join('.') || (issue.code === 'unrecognized_keys' ? issue.keys.join(', ') : 'body'),
    message: issue.message,
  })))
}
