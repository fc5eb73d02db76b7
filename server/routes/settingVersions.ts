import { z } from 'zod'
import {
  settingChange,
  settingReturn,
  settingVersions,
  settingVersionView,
} from '../../shared/schemas/settingGroups.ts'
import type { Parts } from '../config/parts.ts'
import {
  changeSettings,
  groupNamed,
  listSettings,
  readVersions,
  returnSettings,
} from '../services/settings/versions.ts'
import { versionIn } from './ifMatch.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const params = z.object({ group: z.string().min(1).max(40) })

export const settingVersionRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/settings/groups',
    action: 'settingVersions.read',
    summary: 'What is set in every group, since when, by whom and why',
    answer: settingVersions,
    handle: async () => ({ settings: await listSettings(parts) }),
  }),
  route({
    method: 'get',
    path: '/api/settings/groups/:group',
    action: 'settingVersions.read',
    summary: 'All versions of one group, newest first',
    params,
    answer: settingVersions,
    handle: async ({ params: { group } }) => ({ settings: await readVersions(parts, groupNamed(group)) }),
  }),
  route({
    method: 'put',
    path: '/api/settings/groups/:group',
    action: 'settings.change',
    summary: 'Another content, as a new version with its reason; needs If-Match with the version in force',
    params,
    body: settingChange,
    answer: settingVersionView,
    handle: ({ params: { group }, body, caller, request }) =>
      changeSettings(parts, group, body, { personId: caller.person.id, version: versionIn(request) }),
  }),
  route({
    method: 'post',
    path: '/api/settings/groups/:group/return',
    action: 'settings.change',
    summary: 'The content of an older version again, as a new version; needs If-Match with the version in force',
    params,
    body: settingReturn,
    answer: settingVersionView,
    handle: ({ params: { group }, body, caller, request }) =>
      returnSettings(parts, group, body, { personId: caller.person.id, version: versionIn(request) }),
  }),
]
