import * as z from 'zod/mini'
import { ErrorAnswer } from '#shared/schemas/common'
import type { OpenApiDocument } from '#shared/schemas/openapi'
import type { ApiRoute } from './openapi-routes'

type Json = Record<string, unknown>

const refusals: Record<number, string> = {
  400: 'Unreadable or invalid; the fields at fault are named.',
  401: 'Nobody is signed in.',
  403: 'This needs another role.',
  404: 'Missing.',
  409: 'Someone changed it meanwhile; the current state comes along.',
  413: 'Too large.',
  415: 'No JSON.',
  422: 'A rule refuses it; the code says which.',
  429: 'Too often; Retry-After says when.',
}

/** A schema as JSON Schema 2020-12. What is read may be looser than what is made of it, so the direction matters. */
function jsonSchema(schema: z.ZodMiniType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...json } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Json
  return json
}

/** Members of an object schema as parameters of a path or an address. */
function parameters(schema: z.ZodMiniType | undefined, place: 'path' | 'query'): Json[] {
  if (!schema) return []
  const { properties = {}, required = [] } = jsonSchema(schema, 'input') as { properties?: Record<string, Json>, required?: string[] }
  return Object.entries(properties).map(([name, member]) => ({
    name,
    in: place,
    required: place === 'path' || (required.includes(name) && !('default' in member)),
    schema: member,
  }))
}

const keyHeader: Json = {
  name: 'Idempotency-Key',
  in: 'header',
  required: true,
  description: 'The same key with the same body gets the same answer, whatever happened in between.',
  schema: { type: 'string', format: 'uuid' },
}

function success({ status, answer }: ApiRoute): Json {
  if (answer === null) return { [status]: { description: 'Done.' } }
  if (answer === 'stream') return { [status]: { description: 'Server-sent events.', content: { 'text/event-stream': { schema: { type: 'string' } } } } }
  if (answer === 'csv') return { [status]: { description: 'A table, RFC 4180.', content: { 'text/csv': { schema: { type: 'string' } } } } }
  return { [status]: { description: 'Done.', content: { 'application/json': { schema: jsonSchema(answer, 'output') } } } }
}

/** The refusals that a route can answer by what it takes. */
function refusalCodes({ method, permission, body, query, params, idempotent }: ApiRoute): number[] {
  return [
    ...(body || query || params || idempotent ? [400] : []),
    ...(permission === 'public' ? [] : [401, 403]),
    ...(params ? [404] : []),
    ...(method === 'get' ? [] : [409, 422]),
    ...(body ? [413, 415] : []),
    429,
  ]
}

function operation(route: ApiRoute): Json {
  const { body, permission } = route
  return {
    operationId: `${route.method}${route.path.replace(/^\/api/, '').replace(/[/.{}-]+(\w)?/g, (_, letter: string | undefined) => letter?.toUpperCase() ?? '')}`,
    summary: route.summary,
    tags: [route.path.split('/')[2]?.replace('.json', '') ?? 'api'],
    'x-permission': permission,
    ...(permission === 'public' ? { security: [] } : {}),
    parameters: [...parameters(route.params, 'path'), ...parameters(route.query, 'query'), ...(route.idempotent ? [keyHeader] : [])],
    ...(body ? { requestBody: { required: true, content: { 'application/json': { schema: jsonSchema(body, 'input') } } } } : {}),
    responses: {
      ...success(route),
      ...Object.fromEntries(refusalCodes(route).map(code => [code, { $ref: `#/components/responses/Refusal${code}` }])),
    },
  }
}

/**
 * The description of the API in OpenAPI 3.1, made from the schemas that the routes themselves check by.
 * @param version of the product
 */
export function describeApi(routes: readonly ApiRoute[], version: string): OpenApiDocument {
  const paths: Record<string, Json> = {}
  for (const route of routes) paths[route.path] = { ...paths[route.path], [route.method]: operation(route) }
  const content = { 'application/json': { schema: { $ref: '#/components/schemas/Refusal' } } }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Potbell',
      version,
      description: 'Quantities are strings with a decimal point, instants ISO 8601 in UTC with milliseconds, days in the shop\'s zone. '
        + 'Lists answer items and nextCursor. Requests that change something need the shop\'s own Origin.',
    },
    paths,
    components: {
      schemas: { Refusal: jsonSchema(ErrorAnswer, 'output') },
      responses: Object.fromEntries(Object.entries(refusals).map(([code, description]) => [`Refusal${code}`, { description, content }])),
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'potbell_session' } },
    },
  }
}
