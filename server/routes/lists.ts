import { z } from 'zod'
import { listContent, listView } from '../../shared/schemas/distributionList.ts'
import type { Parts } from '../config/parts.ts'
import { addList, changeList, leaveList, listLists, readList, retireList } from '../services/lists.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const listInPath = z.object({ listId: idInPath })

export const listRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/lists',
    action: 'lists.read',
    summary: 'Distribution lists in use, by name',
    answer: z.object({ lists: z.array(listView) }),
    handle: async () => ({ lists: await listLists(parts) }),
  }),
  route({
    method: 'get',
    path: '/api/lists/:listId',
    action: 'lists.read',
    summary: 'One distribution list',
    params: listInPath,
    answer: listView,
    handle: ({ params }) => readList(parts, params.listId),
  }),
  route({
    method: 'post',
    path: '/api/lists',
    action: 'lists.change',
    summary: 'A new distribution list',
    body: listContent,
    answer: listView,
    status: 201,
    handle: ({ body, caller }) => addList(parts, body, caller.person.id),
  }),
  route({
    method: 'put',
    path: '/api/lists/:listId',
    action: 'lists.change',
    summary: 'Another content of a list; needs If-Match with its version',
    params: listInPath,
    body: listContent,
    answer: listView,
    handle: ({ params, body, caller, request }) =>
      changeList(parts, params.listId, versionIn(request), body, caller.person.id),
  }),
  route({
    method: 'delete',
    path: '/api/lists/:listId',
    action: 'lists.change',
    summary: 'Takes a list out of use that no limit names; needs If-Match with its version',
    params: listInPath,
    handle: ({ params, caller, request }) => retireList(parts, params.listId, versionIn(request), caller.person.id),
  }),
  route({
    method: 'delete',
    path: '/api/profile/lists/:listId',
    action: 'profile.change',
    summary: 'Leaves a list oneself; a safety list needs an operator',
    params: listInPath,
    handle: ({ params, caller }) => leaveList(parts, params.listId, caller.person.id),
  }),
]
