import { FetchError } from 'ofetch'
import { newUuid } from '#shared/utils/uuid'

/** What the API says when it does not do what was asked, or why it could not be asked at all. */
export class ApiFailure extends Error {
  constructor(
    /** HTTP status; 0 when the server was not reached. */
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields: { path: string; message: string }[] = [],
    /** The rest of the answer, for example `current` of a version conflict. */
    readonly answer: Record<string, unknown> = {},
  ) {
    super(message)
    this.name = 'ApiFailure'
  }

  /** True when the same request may succeed later without anybody changing it. */
  get passing(): boolean {
    return this.status === 0 || this.status === 429 || this.status >= 500
  }
}

interface Options {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  body?: unknown
  query?: Record<string, string | number | boolean | undefined>
  /** Stored with what waits to be sent, so that a retry is the same request. */
  idempotencyKey?: string
  signal?: AbortSignal
}

/**
 * Asks the API. Every POST carries an idempotency key.
 *
 * @throws ApiFailure for every refusal and for a server that cannot be reached
 */
export async function callApi<T>(path: string, options: Options = {}): Promise<T> {
  const { method = 'GET', body, query, signal } = options
  const headers: Record<string, string> = method === 'POST' ? { 'Idempotency-Key': options.idempotencyKey ?? newUuid() } : {}
  try {
    return await $fetch<T>(path, { method, body: body as Record<string, unknown>, query, headers, signal, retry: 0 }) as T
  } catch (error) {
    throw toFailure(error)
  }
}

/** Turns whatever a request threw into one shape. */
export function toFailure(error: unknown): ApiFailure {
  if (error instanceof ApiFailure) return error
  if (!(error instanceof FetchError)) {
    return new ApiFailure(0, 'failed', error instanceof Error ? error.message : String(error))
  }
  if (error.status === undefined) return new ApiFailure(0, 'unreachable', 'The server does not answer. Nothing you entered is lost.')
  const answer = (error.data ?? {}) as { code?: string; message?: string; fields?: { path: string; message: string }[] }
  return new ApiFailure(error.status, answer.code ?? 'failed', answer.message ?? 'The server answered with an error.', answer.fields ?? [], { ...answer })
}
