import { z } from 'zod'
import { installationView, sessionView } from '../../shared/schemas/session.ts'
import type { InstallationView, SessionView, SetUpRequest, SignInRequest } from '../../shared/schemas/session.ts'
import { ProblemError } from './problem.ts'
import { request } from './request.ts'

/** Null: nobody is signed in at this browser. */
export async function readSession(): Promise<SessionView | null> {
  try {
    return await request('GET', '/api/session', sessionView)
  } catch (error) {
    if (error instanceof ProblemError && error.status === 401) return null
    throw error
  }
}

export const signIn = (credentials: SignInRequest): Promise<SessionView> =>
  request('POST', '/api/session', sessionView, credentials)

export async function signOut(): Promise<void> {
  await request('DELETE', '/api/session', z.unknown())
}

export const readInstallation = (): Promise<InstallationView> => request('GET', '/api/installation', installationView)

export async function completeSetUp(details: SetUpRequest): Promise<void> {
  await request('POST', '/api/setup', z.unknown(), details)
}
