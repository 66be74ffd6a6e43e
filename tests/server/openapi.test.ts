import { readFileSync, readdirSync } from 'node:fs'
import { join, relative, sep } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import type { OpenApiDocument } from '#shared/schemas/openapi'
import { apiRoutes, type ApiRoute } from '../../server/utils/openapi-routes'
import { Client } from './support/http'

const folder = fileURLToPath(new URL('../../server/api', import.meta.url))

/** What a route's file says of itself. */
interface RouteFile {
  key: string
  source: string
}

/** Every file under `server/api` but the one that answers what no route does. */
function routeFiles(): RouteFile[] {
  return readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts') && name !== '[...].ts').map((name) => {
    const parts = /^(?<path>.+)\.(?<method>get|post|put|patch|delete)\.ts$/.exec(relative(folder, join(folder, name)).split(sep).join('/'))?.groups
    if (!parts?.path || !parts.method) throw new Error(`${name} does not carry its method`)
    const path = `/api/${parts.path}`.replace(/\/index$/, '').replace(/\[(\w+)\]/g, '{$1}')
    return { key: `${parts.method} ${path}`, source: readFileSync(join(folder, name), 'utf8') }
  })
}

const files = routeFiles()
const keyOf = (route: ApiRoute): string => `${route.method} ${route.servedBy ?? route.path}`
const sourceOf = (route: ApiRoute): string => files.find(file => file.key === keyOf(route))?.source ?? ''

describe('the list of routes', () => {
  it('holds every file and nothing else', () => {
    expect([...new Set(apiRoutes.map(keyOf))].sort()).toEqual(files.map(file => file.key).sort())
  })

  it('names every path and method once', () => {
    const keys = apiRoutes.map(route => `${route.method} ${route.path}`)
    expect(keys).toHaveLength(new Set(keys).size)
  })

  describe.each(apiRoutes.map(route => [`${route.method} ${route.path}`, route] as const))('%s', (_, route) => {
    const source = sourceOf(route)

    it('has the permission of its file', () => {
      expect(/permission: '([^']+)'/.exec(source)?.[1]).toBe(route.permission)
    })

    it('has the status of its file', () => {
      expect(Number(/^\s*status: (\d+)/m.exec(source)?.[1] ?? 200)).toBe(route.status)
    })

    it('takes what its file takes', () => {
      const takes = (what: string): boolean => new RegExp(`^\\s*${what}: \\w+`, 'm').test(source)
      expect({ query: takes('query'), params: takes('params'), body: takes('body') }).toEqual({
        query: route.query !== undefined,
        params: route.params !== undefined || route.servedBy !== undefined,
        body: route.body !== undefined,
      })
    })

    it('needs a key where its file does', () => {
      expect(route.idempotent).toBe(route.method === 'post' && !/idempotent: false/.test(source))
    })
  })
})

describe('GET /api/openapi.json', () => {
  it('describes every route to anybody, in OpenAPI 3.1', async () => {
    const { status, body } = await new Client().get<OpenApiDocument>('/api/openapi.json')
    expect(status).toBe(200)
    expect(body.openapi).toBe('3.1.0')
    const described = Object.entries(body.paths).flatMap(([path, methods]) => Object.keys(methods).map(method => `${method} ${path}`))
    expect(described.sort()).toEqual(apiRoutes.map(route => `${route.method} ${route.path}`).sort())
  })

  it('refers to nothing that is not there', async () => {
    const { body } = await new Client().get<OpenApiDocument>('/api/openapi.json')
    const references = [...JSON.stringify(body).matchAll(/"\$ref":"#\/([^"]+)"/g)].map(match => match[1] ?? '')
    expect(references.length).toBeGreaterThan(0)
    for (const reference of new Set(references)) {
      const target = reference.split('/').reduce<unknown>((place, key) => (place as Record<string, unknown> | undefined)?.[key], body)
      expect(target, reference).toBeDefined()
    }
  })

  it('declares every parameter of a path', async () => {
    const { body } = await new Client().get<{ paths: Record<string, Record<string, { parameters: { name: string, in: string, required: boolean }[] }>> }>('/api/openapi.json')
    for (const [path, methods] of Object.entries(body.paths)) {
      const named = [...path.matchAll(/\{(\w+)\}/g)].map(match => match[1])
      for (const { parameters } of Object.values(methods)) {
        expect(parameters.filter(parameter => parameter.in === 'path').map(parameter => parameter.name), path).toEqual(named)
      }
    }
  })

  it('gives each operation a name of its own', async () => {
    const { body } = await new Client().get<{ paths: Record<string, Record<string, { operationId: string }>> }>('/api/openapi.json')
    const names = Object.values(body.paths).flatMap(methods => Object.values(methods).map(operation => operation.operationId))
    expect(names).toHaveLength(new Set(names).size)
  })
})
