import type { IncomingMessage } from 'node:http'
import { Refusal } from './errors'

/** Most bytes that a JSON body may have. */
const maxBodyBytes = 1_000_000

/** Bytes of an oversized body that are still read, so that the client gets its answer instead of a reset. */
const maxDrainedBytes = 16_000_000

/**
 * Reads a JSON body while counting its bytes, whatever Content-Length says.
 *
 * @throws Refusal 415 for another content type, 413 after draining what is too large, 400 for what is no JSON
 */
export async function readJsonBody(request: IncomingMessage): Promise<unknown> {
  const type = request.headers['content-type']?.split(';')[0]?.trim().toLowerCase()
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of request as AsyncIterable<Buffer>) {
    size += chunk.length
    if (size <= maxBodyBytes) chunks.push(chunk)
    else chunks.length = 0
    if (size > maxDrainedBytes) break
  }
  if (size > maxBodyBytes) throw new Refusal(413, 'too-large', 'That is more than one request may carry.')
  if (size === 0) return undefined
  if (type !== 'application/json') throw new Refusal(415, 'not-json', 'Send JSON with the content type application/json.')
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks)))
  } catch {
    throw new Refusal(400, 'unreadable', 'That is no JSON.')
  }
}
