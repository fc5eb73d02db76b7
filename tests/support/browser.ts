/** Requests as a page of the program sends them, with its cookies. */
import type { Express } from 'express'
import request from 'supertest'
import { usualPassword } from './factories.ts'

export type Browser = ReturnType<typeof request.agent>

/** A browser of its own; nobody is signed in. */
export const openBrowser = (app: Express): Browser => request.agent(app).set('X-Offing', '1')

export async function signedIn(app: Express, email: string | null, password = usualPassword): Promise<Browser> {
  const browser = openBrowser(app)
  await browser.post('/api/session').send({ email, password }).expect(200)
  return browser
}
