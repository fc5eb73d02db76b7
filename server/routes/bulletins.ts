import { z } from 'zod'
import { withReason } from '../../shared/schemas/alert.ts'
import {
  bulletinDraft,
  bulletinEdit,
  bulletinFigure,
  bulletinIssue,
  bulletinView,
  publicBulletin,
} from '../../shared/schemas/bulletin.ts'
import type { Parts } from '../config/parts.ts'
import { bulletinFiguresOf, bulletinOfficeOf } from '../presenters/bulletin.ts'
import {
  addDraft,
  cancelBulletin,
  changeDraft,
  discardDraft,
  issueBulletin,
  listBulletins,
  listPublicBulletins,
  proofBulletin,
  readBulletin,
} from '../services/bulletins.ts'
import { notFound } from '../services/problems.ts'
import { settingInForce } from '../services/settings.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'
import { consentDeadline, consentIn } from './secondPerson.ts'

const params = z.object({ bulletinId: idInPath })
const pageQuery = z.object({ before: idInPath.optional() })

const reading = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/bulletins',
    action: 'bulletins.read',
    summary: 'Drafts, and issued bulletins newest first',
    query: pageQuery,
    answer: z.object({
      drafts: z.array(bulletinView),
      bulletins: z.array(bulletinView),
      next: z.number().int().nullable(),
    }),
    handle: async ({ query }) => listBulletins(parts, await bulletinOfficeOf(parts), query.before ?? null),
  }),
  route({
    method: 'get',
    path: '/api/bulletins/:bulletinId',
    action: 'bulletins.read',
    summary: 'One bulletin; an issued one as it was frozen',
    params,
    answer: bulletinView,
    handle: async (asked) => readBulletin(parts, await bulletinOfficeOf(parts), asked.params.bulletinId),
  }),
  route({
    method: 'get',
    path: '/api/bulletinFigures',
    action: 'bulletins.read',
    summary: 'What a bulletin could say of every station and place now',
    answer: z.object({ figures: z.array(bulletinFigure) }),
    handle: async () => ({ figures: await bulletinFiguresOf(parts) }),
  }),
  route({
    method: 'get',
    path: '/api/publicBulletins',
    action: 'publicBulletins.read',
    summary: 'Bulletins in force or lately past, without names; 404 while the office keeps them to itself',
    answer: z.object({ portName: z.string(), bulletins: z.array(publicBulletin) }),
    async handle() {
      const { isPublic } = await settingInForce(parts, 'bulletins')
      if (!isPublic) throw notFound('public page of bulletins', 'this office')
      const { portName } = await settingInForce(parts, 'port')
      return { portName, bulletins: await listPublicBulletins(parts) }
    },
  }),
]

const drafting = (parts: Parts): Route[] => [
  route({
    method: 'post',
    path: '/api/bulletins',
    action: 'bulletins.change',
    summary: 'A new draft; the figures are frozen as they are now',
    body: bulletinDraft,
    answer: bulletinView,
    status: 201,
    async handle({ body, caller }) {
      const office = await bulletinOfficeOf(parts)
      const order = { draft: body, figures: await bulletinFiguresOf(parts), personId: caller.person.id }
      return readBulletin(parts, office, await addDraft(parts, office, order))
    },
  }),
  route({
    method: 'put',
    path: '/api/bulletins/:bulletinId',
    action: 'bulletins.change',
    summary: 'Another content of a draft; needs If-Match with its version',
    params,
    body: bulletinEdit,
    answer: bulletinView,
    async handle({ params: { bulletinId }, body, caller, request }) {
      const office = await bulletinOfficeOf(parts)
      const figures = body.freezeAgain ? await bulletinFiguresOf(parts) : null
      const change = { bulletinId, version: versionIn(request), personId: caller.person.id }
      await changeDraft(parts, office, { ...change, draft: body.draft, figures })
      return readBulletin(parts, office, bulletinId)
    },
  }),
  route({
    method: 'delete',
    path: '/api/bulletins/:bulletinId',
    action: 'bulletins.change',
    summary: 'Throws a draft away; needs If-Match with its version',
    params,
    async handle({ params: { bulletinId }, caller, request }) {
      const change = { bulletinId, version: versionIn(request), personId: caller.person.id }
      await discardDraft(parts, await bulletinOfficeOf(parts), change)
    },
  }),
]

const issuing = (parts: Parts): Route[] => [
  route({
    method: 'post',
    path: '/api/bulletins/:bulletinId/issue',
    action: 'bulletins.change',
    summary: 'Freezes a draft and sends it to its lists; needs If-Match with its version',
    params,
    body: bulletinIssue,
    answer: bulletinView,
    deadlineMilliseconds: consentDeadline,
    async handle({ params: { bulletinId }, body, caller, request }) {
      const office = await bulletinOfficeOf(parts)
      const look = await consentIn(parts, body, caller, request)
      const change = { bulletinId, version: versionIn(request), personId: caller.person.id }
      await issueBulletin(parts, office, { ...change, look })
      return readBulletin(parts, office, bulletinId)
    },
  }),
  route({
    method: 'post',
    path: '/api/bulletins/:bulletinId/cancel',
    action: 'bulletins.change',
    summary: 'Cancels an issued bulletin and tells who got it; needs If-Match with its version',
    params,
    body: withReason,
    answer: bulletinView,
    async handle({ params: { bulletinId }, body, caller, request }) {
      const office = await bulletinOfficeOf(parts)
      const change = { bulletinId, version: versionIn(request), personId: caller.person.id }
      await cancelBulletin(parts, office, { ...change, reason: body.reason })
      return readBulletin(parts, office, bulletinId)
    },
  }),
  route({
    method: 'post',
    path: '/api/bulletins/:bulletinId/proof',
    action: 'bulletins.change',
    summary: 'Its e-mail to oneself alone',
    params,
    async handle({ params: { bulletinId }, caller }) {
      const office = await bulletinOfficeOf(parts)
      await proofBulletin(parts, office, { bulletinId, personId: caller.person.id })
    },
  }),
]

export const bulletinRoutes = (parts: Parts): Route[] => [...reading(parts), ...drafting(parts), ...issuing(parts)]
