import type { H3Event } from 'h3'
import { createError } from 'h3'

/** Ends a request in a middleware with the error shape of the API. */
export function refuse(event: H3Event, statusCode: number, code: string, message: string): never {
  throw createError({ statusCode, statusMessage: code, data: { code, message, fields: [] } })
}
