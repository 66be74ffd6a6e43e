import type { H3Event } from 'h3'
import { setResponseHeader, setResponseStatus } from 'h3'

/** What the API answers with whenever it does not do what was asked. */
export interface RefusalAnswer {
  code: string
  message: string
  fields: { path: string; message: string }[]
}

/** Ends a request in a middleware with the error shape of the API. */
export function refuse(event: H3Event, status: number, code: string, message: string): RefusalAnswer {
  setResponseHeader(event, 'Cache-Control', 'no-store')
  setResponseStatus(event, status)
  return { code, message, fields: [] }
}
