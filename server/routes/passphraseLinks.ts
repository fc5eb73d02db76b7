import { z } from 'zod'
import { passphraseChoice, passphraseLinkView, resetRequest } from '../../shared/schemas/account.ts'
import type { Parts } from '../config/parts.ts'
import { askForReset, choosePassphrase, showPassphraseLink } from '../services/people/passphraseLinks.ts'
import { createAskThrottle } from '../services/people/askThrottle.ts'
import { Refused } from '../services/problems.ts'
import { settingInForce } from '../services/settings.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const params = z.object({ token: z.string().min(1).max(200) })

export function passphraseLinkRoutes(parts: Parts): Route[] {
  const throttle = createAskThrottle(parts.clock)
  return [
    route({
      method: 'post',
      path: '/api/passphrase-links',
      action: 'passphraseLinks.complete',
      summary: 'Asks for a link to choose a new passphrase; the answer is the same for every address',
      body: resetRequest,
      status: 202,
      handle: async ({ body, request }) => {
        const wait = throttle.ask(request.ip ?? 'unknown')
        if (wait > 0) throw tooManyAsked(wait)
        const port = await settingInForce(parts, 'port')
        // Not waited for: how long it takes would tell whether somebody is known by this address.
        askForReset(parts, body.email, port).catch((error: unknown) =>
          parts.logger.error({ error }, 'a link to choose a passphrase could not be written'),
        )
      },
    }),
    route({
      method: 'get',
      path: '/api/passphrase-links/:token',
      action: 'passphraseLinks.read',
      summary: 'Whose link this is and until when it is good; asking changes nothing',
      params,
      answer: passphraseLinkView,
      handle: async ({ params: { token } }) =>
        showPassphraseLink(parts, token, (await settingInForce(parts, 'port')).portName),
    }),
    route({
      method: 'post',
      path: '/api/passphrase-links/:token',
      action: 'passphraseLinks.complete',
      summary: 'Chooses the passphrase; the link is used up',
      params,
      body: passphraseChoice,
      deadlineMilliseconds: 20_000,
      handle: ({ params: { token }, body }) => choosePassphrase(parts, token, body.password),
    }),
  ]
}

const tooManyAsked = (seconds: number): Refused =>
  new Refused({
    status: 429,
    code: 'passphraseLink.tooManyAsked',
    title: 'Asked too often',
    detail: `Wait ${Math.ceil(seconds / 60)} min before asking again. An administrator can send you a link too.`,
    retryAfterSeconds: seconds,
  })
