import type { EngineError } from '#shared/engine/error'

/** One thing wrong with one field of what was sent. Never carries the value itself. */
export interface FieldFault {
  path: string
  message: string
}

/**
 * A refusal that the caller can act on. Everything else that is thrown is our own fault and answers 500.
 * `extra` is merged into the answer, for example `{ current }` of a version conflict.
 */
export class Refusal extends Error {
  constructor(
    readonly status: 400 | 401 | 403 | 404 | 405 | 409 | 413 | 415 | 422 | 429 | 503,
    readonly code: string,
    message: string,
    readonly fields: FieldFault[] = [],
    readonly extra: Record<string, unknown> = {},
  ) {
    super(message)
    this.name = 'Refusal'
  }
}

export const invalid = (fields: FieldFault[], message = 'Some fields need another look.') =>
  new Refusal(400, 'invalid', message, fields)

export const notFound = (what: string) => new Refusal(404, 'not-found', `${what} was not found.`)

export const forbidden = (message = 'This needs another role.') => new Refusal(403, 'forbidden', message)

export const ruleBroken = (code: string, message: string, fields: FieldFault[] = []) =>
  new Refusal(422, code, message, fields)

/** An error of the arithmetic is an input that cannot be: 400 with the field that caused it. */
export const fromEngine = (error: EngineError) =>
  new Refusal(400, error.code, error.message, [{ path: error.field, message: error.message }])
