import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import {
  handOverNotes,
  handOverSheet,
  handOverSigning,
  owedNotes,
  takeOver,
  watchNow,
  watchStart,
  watchView,
} from '../../shared/schemas/watch.ts'
import type { Parts } from '../config/parts.ts'
import { presentSheet, presentWatchNow } from '../presenters/watch.ts'
import { proveSecondPerson } from '../services/sessions/secondPerson.ts'
import {
  endWatch,
  keepNotes,
  listWatches,
  signHandOver,
  startWatch,
  takeOverAtOnce,
  writeOwed,
} from '../services/watches.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'
import { consentDeadline } from './secondPerson.ts'

const watching = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/watches/now',
    action: 'watches.read',
    summary: 'Who is on watch, how it began, and notes that are owed',
    answer: watchNow,
    handle: () => presentWatchNow(parts),
  }),
  route({
    method: 'get',
    path: '/api/watches',
    action: 'log.read',
    summary: 'Watches, newest first',
    query: z.object({ before: idInPath.optional() }),
    answer: z.object({ watches: z.array(watchView), next: z.number().int().nullable() }),
    handle: ({ query }) => listWatches(query.before ?? null),
  }),
  route({
    method: 'post',
    path: '/api/watches',
    action: 'watches.change',
    summary: 'Begin a watch where nobody is on watch',
    body: watchStart,
    answer: watchNow,
    status: 201,
    async handle({ body, caller }) {
      await startWatch(parts, { personId: caller.person.id, name: body.name })
      return presentWatchNow(parts)
    },
  }),
  route({
    method: 'post',
    path: '/api/watches/end',
    action: 'watches.change',
    summary: "End one's own watch with nobody to follow, with a reason",
    body: withReason,
    answer: watchNow,
    async handle({ body, caller }) {
      await endWatch(parts, { personId: caller.person.id, reason: body.reason })
      return presentWatchNow(parts)
    },
  }),
]

const handingOver = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/handOvers/sheet',
    action: 'log.read',
    summary: 'The sheet of a hand-over as it would be signed now',
    answer: handOverSheet,
    handle: () => presentSheet(parts),
  }),
  route({
    method: 'put',
    path: '/api/handOvers/notes',
    action: 'watches.change',
    summary: 'Notes to open items and what to expect, by who is on watch',
    body: handOverNotes,
    answer: handOverSheet,
    async handle({ body, caller }) {
      await keepNotes(parts, { ...body, personId: caller.person.id })
      return presentSheet(parts)
    },
  }),
  route({
    method: 'post',
    path: '/api/handOvers',
    action: 'watches.change',
    summary: 'Hand over: both sign, the relief by passphrase at the same desk',
    body: handOverSigning,
    answer: watchNow,
    status: 201,
    deadlineMilliseconds: consentDeadline,
    async handle({ body, caller, request }) {
      const from = { address: request.ip ?? 'unknown', byPersonId: caller.person.id }
      const reliefId = await proveSecondPerson(parts, body.relief, from, 'relief')
      const sheet = await presentSheet(parts)
      const order = { personId: caller.person.id, reliefId, name: body.name, sound: body.sound, sheet }
      await signHandOver(parts, order)
      return presentWatchNow(parts)
    },
  }),
  route({
    method: 'post',
    path: '/api/handOvers/takeOver',
    action: 'watches.change',
    summary: 'Take over at once from who is on watch; missing notes are owed',
    body: takeOver,
    answer: watchNow,
    status: 201,
    async handle({ body, caller }) {
      await takeOverAtOnce(parts, { ...body, personId: caller.person.id, sheet: await presentSheet(parts) })
      return presentWatchNow(parts)
    },
  }),
  route({
    method: 'post',
    path: '/api/handOvers/:handOverId/owed',
    action: 'watches.change',
    summary: 'Write notes that one owes',
    params: z.object({ handOverId: idInPath }),
    body: owedNotes,
    answer: watchNow,
    async handle({ params, body, caller }) {
      await writeOwed(parts, { ...params, personId: caller.person.id, notes: body.notes })
      return presentWatchNow(parts)
    },
  }),
]

export const watchRoutes = (parts: Parts): Route[] => [...watching(parts), ...handingOver(parts)]
