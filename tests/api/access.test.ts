import type { Express } from 'express'
import express from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { allRoutes } from '../../server/routes/index.ts'
import { mountRoutes, route } from '../../server/routes/registry.ts'
import type { Route } from '../../server/routes/registry.ts'
import { changes, may } from '../../shared/access.ts'
import type { Action } from '../../shared/access.ts'
import type { Role } from '../../shared/schemas/session.ts'
import { openBrowser, signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express
let routes: Route[]
const emails = new Map<Role, string>()
const roles: Role[] = ['admin', 'operator', 'partner']

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  routes = allRoutes(parts)
  for (const role of roles) emails.set(role, (await makePerson(parts.clock, { role })).email ?? '')
})

const browserOf = (role: Role | null): Promise<Browser> | Browser =>
  role ? signedIn(app, emails.get(role) ?? '') : openBrowser(app)

/** The number of a resource that does not exist, so that nothing is changed by asking. */
const concrete = (path: string): string => path.replace(/:\w+/g, '999999')

describe('every route', () => {
  test.each([null, ...roles])('asked by %s answers as the table of access says', async (role) => {
    const found: [string, boolean][] = []
    const wanted: [string, boolean][] = []
    let browser = await browserOf(role)
    for (const { method, path, action } of routes) {
      const { status, body } = await browser[method](concrete(path))
      const refused = status === 403 || (status === 401 && body.code === 'session.none')
      if (refused) expect([path, status]).toEqual([path, role ? 403 : 401])
      expect([path, status < 500]).toEqual([path, true])
      found.push([`${method} ${path}`, !refused])
      wanted.push([`${method} ${path}`, may(role, action)])
      if (action === 'session.end') browser = await browserOf(role)
    }
    expect(found).toEqual(wanted)
  })

  test('that changes something asks for an action that a read-only session is refused, except signing in and out', () => {
    const misnamed = routes
      .filter(({ method, action }) => (method !== 'get') !== changes(action))
      .map(({ method, path }) => `${method} ${path}`)
    expect(misnamed).toEqual(['post /api/session', 'delete /api/session'])
  })
})

describe('a route', () => {
  const plain = { method: 'get', path: '/api/ships', summary: 'Ships', handle: async () => undefined } as const

  test('that asks for nothing in the table of access stops the start', () => {
    const unknown: Action = JSON.parse('"ships.read"')
    expect(() => mountRoutes(express(), [route({ ...plain, action: unknown })])).toThrow(
      'GET /api/ships asks for ships.read, which has no row in shared/access',
    )
  })

  test('that is declared twice stops the start', () => {
    const twice = [route({ ...plain, action: 'jobs.read' }), route({ ...plain, action: 'jobs.read' })]
    expect(() => mountRoutes(express(), twice)).toThrow('GET /api/ships is declared twice')
  })
})

describe('the document of the API', () => {
  test('describes every route, with parameters, shapes and who may ask', async () => {
    const browser = await browserOf('partner')
    const { body } = await browser.get('/api/openapi.json').expect(200)
    expect(body.openapi).toBe('3.1.0')
    const described = Object.entries<Record<string, object>>(body.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method} ${path}`),
    )
    expect(described.sort()).toEqual(
      routes.map(({ method, path }) => `${method} ${path.replace(/:(\w+)/g, '{$1}')}`).sort(),
    )
  })

  test('keeps to the rules of OpenAPI: path parameters required, references resolved, names of operations unique', async () => {
    const browser = await browserOf('admin')
    const { body } = await browser.get('/api/openapi.json').expect(200)
    const names = new Set<string>()
    for (const [path, methods] of Object.entries<Record<string, Operation>>(body.paths)) {
      for (const operation of Object.values(methods)) {
        expect(names.has(operation.operationId)).toBe(false)
        names.add(operation.operationId)
        const inPath = (operation.parameters ?? []).filter((parameter) => parameter.in === 'path')
        expect(inPath.map(({ name, required }) => ({ name, required }))).toEqual(
          [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => ({ name, required: true })),
        )
        expect(Object.keys(operation.responses).length).toBeGreaterThan(1)
      }
    }
    for (const [, reference] of JSON.stringify(body).matchAll(/"\$ref":"#\/([^"]+)"/g)) {
      const target = (reference ?? '').split('/').reduce((at, name) => at?.[name], body)
      expect(target).toBeDefined()
    }
  })
})

interface Operation {
  operationId: string
  parameters?: { in: string; name: string; required?: boolean }[]
  responses: Record<string, object>
}
