/** A person at a browser of their own, and the same person's calls to the API. */
import { chromium } from 'playwright-core'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { inject } from 'vitest'
import type { z } from 'zod'
import type { Role } from '../../shared/schemas/session.ts'

export const programUrl = (): string => inject('programUrl')

export const personOf = (role: Role) => {
  const person = inject('people').find((one) => one.role === role)
  if (!person) throw new Error(`The demonstration has nobody with role ${role}`)
  return person
}

export const control = async (what: 'server/kill' | 'server/start' | 'simulator/kill' | 'simulator/start') => {
  const answer = await fetch(`${inject('controlUrl')}/${what}`, { method: 'POST' })
  if (!answer.ok) throw new Error(`${what}: ${answer.status} ${await answer.text()}`)
}

let browser: Promise<Browser> | null = null

export interface Visitor {
  context: BrowserContext
  page: Page
  /** Addresses asked for outside the program's own origin. */
  foreign: string[]
  /** Errors that the page wrote to its console or threw. */
  complaints: string[]
}

export async function newVisitor(options: { width?: number; height?: number } = {}): Promise<Visitor> {
  browser ??= chromium.connect(inject('browserEndpoint'))
  const { width = 1440, height = 900 } = options
  const context = await (
    await browser
  ).newContext({ baseURL: programUrl(), viewport: { width, height }, timezoneId: 'UTC' })
  const page = await context.newPage()
  const own = new URL(programUrl()).host
  const foreign: string[] = []
  const complaints: string[] = []
  const note = (address: string) => {
    if (!/^(data|blob|about):/.test(address) && new URL(address).host !== own) foreign.push(address)
  }
  page.on('request', (request) => note(request.url()))
  page.on('websocket', (socket) => note(socket.url()))
  page.on('console', (message) => {
    // Whether somebody is signed in is asked first thing, and "nobody" is a 401 that every browser notes.
    const isFirstQuestion = /401/.test(message.text()) && message.location().url.endsWith('/api/session')
    if (message.type() === 'error' && !isFirstQuestion) complaints.push(message.text())
  })
  page.on('pageerror', (error) => complaints.push(error.message))
  return { context, page, foreign, complaints }
}

export async function signIn({ page }: Visitor, role: Role): Promise<void> {
  const { email, password } = personOf(role)
  await page.goto('/sign-in')
  await page.getByLabel(/e-mail/i).fill(email)
  await page.locator('input[type=password]').fill(password)
  await page
    .getByRole('button', { name: /sign in|begin|open/i })
    .first()
    .click()
  await page.waitForURL(/\/(watch|places)/)
}

/** Asks the API as the person signed in at this browser. */
export async function ask<T>({ context }: Visitor, path: string, shape: z.ZodType<T>): Promise<T> {
  const answer = await context.request.get(`${programUrl()}/api${path}`)
  if (!answer.ok()) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`)
  return shape.parse(await answer.json())
}

/** Orders something of the API as the person signed in at this browser. */
export async function order<T>(
  { context }: Visitor,
  path: string,
  data: object,
  shape: z.ZodType<T>,
  { method = 'POST', headers = {} }: { method?: string; headers?: Record<string, string> } = {},
): Promise<T> {
  const own = { 'X-Offing': '1', Origin: programUrl(), ...headers }
  const answer = await context.request.fetch(`${programUrl()}/api${path}`, { method, headers: own, data })
  if (!answer.ok()) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`)
  return shape.parse(answer.status() === 204 ? null : await answer.json())
}
