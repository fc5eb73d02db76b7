import { z } from 'zod'
import { personName } from '../../shared/schemas/limit.ts'
import { personChange, personView, profileChange, recipientDraft } from '../../shared/schemas/person.ts'
import type { Parts } from '../config/parts.ts'
import { addRecipient, changeMailSide, listDeputies, listPeople, readPerson } from '../services/people/mailSide.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const personInPath = z.object({ personId: idInPath })

export const peopleRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/people',
    action: 'people.read',
    summary: 'All people with their addresses, hours, deputies and lists',
    answer: z.object({ people: z.array(personView) }),
    handle: async () => ({ people: await listPeople(parts) }),
  }),
  route({
    method: 'get',
    path: '/api/people/:personId',
    action: 'people.read',
    summary: 'One person',
    params: personInPath,
    answer: personView,
    handle: ({ params }) => readPerson(parts, params.personId),
  }),
  route({
    method: 'post',
    path: '/api/people',
    action: 'people.change',
    summary: 'Somebody without a role, who only gets e-mails',
    body: recipientDraft,
    answer: personView,
    status: 201,
    handle: ({ body, caller }) => addRecipient(parts, body, caller.person.id),
  }),
  route({
    method: 'put',
    path: '/api/people/:personId',
    action: 'people.change',
    summary: "A person's address, hours, deputy and absences; needs If-Match with their version",
    params: personInPath,
    body: personChange,
    answer: personView,
    handle: ({ params, body, caller, request }) =>
      changeMailSide(parts, params.personId, versionIn(request), body, caller.person.id),
  }),
  route({
    method: 'put',
    path: '/api/people/:personId/mailSide',
    action: 'mailSides.change',
    summary: "Another person's hours, deputy and absences, as the watch enters them; needs If-Match with their version",
    params: personInPath,
    body: profileChange,
    answer: personView,
    handle: ({ params, body, caller, request }) =>
      changeMailSide(parts, params.personId, versionIn(request), body, caller.person.id),
  }),
  route({
    method: 'get',
    path: '/api/profile/deputies',
    action: 'profile.read',
    summary: 'Names of those who could be told instead of who is signed in',
    answer: z.object({ people: z.array(personName) }),
    handle: async ({ caller }) => ({ people: await listDeputies(caller.person.id) }),
  }),
  route({
    method: 'get',
    path: '/api/profile',
    action: 'profile.read',
    summary: 'What the program knows of who is signed in',
    answer: personView,
    handle: ({ caller }) => readPerson(parts, caller.person.id),
  }),
  route({
    method: 'put',
    path: '/api/profile',
    action: 'profile.change',
    summary: 'Own hours, deputy and absences; needs If-Match with the own version',
    body: profileChange,
    answer: personView,
    handle: ({ body, caller, request }) =>
      changeMailSide(parts, caller.person.id, versionIn(request), body, caller.person.id),
  }),
]
