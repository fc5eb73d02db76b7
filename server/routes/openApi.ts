/** The API's own document, made from the routes' declarations. */
import { OpenAPIRegistry, OpenApiGeneratorV31 } from '@asteasolutions/zod-to-openapi'
import { z } from 'zod'
import { may } from '../../shared/access.ts'
import { problem } from '../../shared/schemas/problem.ts'
import { softwareVersion } from '../config/softwareVersion.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const session = 'session'

function describe(registry: OpenAPIRegistry, { method, path, action, summary, ...shapes }: Route): void {
  const { params, query, body, answer, media, status } = shapes
  const open = may(null, action)
  registry.registerPath({
    method,
    path: path.replace(/:(\w+)/g, '{$1}'),
    summary,
    operationId: `${method}${path.replace(/\W+(\w)/g, (_, letter: string) => letter.toUpperCase())}`,
    tags: [path.split('/')[2] ?? 'api'],
    security: open ? [] : [{ [session]: [] }],
    request: {
      ...(params instanceof z.ZodObject && { params }),
      ...(query instanceof z.ZodObject && { query }),
      ...(body && { body: { required: true, content: { 'application/json': { schema: body } } } }),
    },
    responses: {
      [status]: {
        description: answer ? 'As asked' : 'Done',
        ...(answer && { content: { [media ?? 'application/json']: { schema: answer } } }),
      },
      default: { description: 'A problem', content: { 'application/problem+json': { schema: problem } } },
    },
  })
}

export function openApiDocument(routes: Route[], cookieName: string) {
  const registry = new OpenAPIRegistry()
  registry.registerComponent('securitySchemes', session, { type: 'apiKey', in: 'cookie', name: cookieName })
  for (const declared of routes) describe(registry, declared)
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Offing',
      version: softwareVersion,
      description:
        'SI units; directions in degrees true, clockwise from north; times ISO 8601 UTC. Changes need the header X-Offing: 1.',
      license: { name: 'MIT', identifier: 'MIT' },
    },
    servers: [{ url: '/' }],
  })
}

/** Adds the route of the document to the routes that it describes. */
export function withOpenApi(routes: Route[], cookieName: string): Route[] {
  const own = route({
    method: 'get',
    path: '/api/openapi.json',
    action: 'openapi.read',
    summary: 'This document',
    answer: z.record(z.string(), z.unknown()),
    handle: async () => ({ ...document }),
  })
  const all = [...routes, own]
  const document = openApiDocument(all, cookieName)
  return all
}
