import { sessionView, signInRequest } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { sessionCookieName, sessionCookieOptions } from '../config/sessionCookie.ts'
import { endSession, presentSession, signIn } from '../services/sessions.ts'
import { deviceOf } from '../services/sessions/device.ts'
import { throttleOf } from '../services/sessions/signInThrottle.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

/** Checking a password is slow on purpose, and one waits for the other. */
const signInDeadline = 20_000

export function sessionRoutes(parts: Parts): Route[] {
  const throttle = throttleOf(parts)
  const cookieName = sessionCookieName(parts.environment)
  const cookieOptions = sessionCookieOptions(parts.environment)
  return [
    route({
      method: 'get',
      path: '/api/session',
      action: 'session.read',
      summary: 'Who is signed in',
      answer: sessionView,
      handle: async ({ caller }) => presentSession(parts, caller),
    }),
    route({
      method: 'post',
      path: '/api/session',
      action: 'session.begin',
      summary: 'Sign in, or sign in again after the absolute limit',
      body: signInRequest,
      answer: sessionView,
      deadlineMilliseconds: signInDeadline,
      handle: async ({ body, visitor, request, response }) => {
        const from = { address: request.ip ?? 'unknown', visitor, device: deviceOf(request.get('user-agent')) }
        const { token, caller } = await signIn(parts, throttle, body, from)
        response.cookie(cookieName, token, cookieOptions)
        return presentSession(parts, caller)
      },
    }),
    route({
      method: 'delete',
      path: '/api/session',
      action: 'session.end',
      summary: 'Sign out',
      handle: async ({ visitor, response }) => {
        if (visitor) await endSession(parts, visitor.sessionId, 'signed out')
        response.clearCookie(cookieName, cookieOptions)
      },
    }),
  ]
}
