import { defineEventHandler, setResponseHeader } from 'h3'
import { newId } from '../utils/ids'

/** Every request has an id of ours, in the answer and in the log; a client cannot choose it. */
export default defineEventHandler((event) => {
  event.context.requestId = newId()
  setResponseHeader(event, 'X-Request-Id', event.context.requestId)
})
