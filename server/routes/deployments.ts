import { z } from 'zod'
import type { Request, Response } from 'express'
import { deploymentComparison, deploymentDraftContent, deploymentDraftOrder, deploymentDraftView, deploymentOrder, deploymentRecord } from '../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import type { DeploymentDraftView } from '../../shared/schemas/stationSetUpDeployments.ts'
import { designCheck } from '../../shared/schemas/stationSetUpDesign.ts'
import { surveyPreview, surveyQuestion } from '../../shared/schemas/stationSetUpSurvey.ts'
import { readSurvey } from '../../shared/surveys/readSurvey.ts'
import type { Parts } from '../config/parts.ts'
import { addDraft, changeDraft, checkDraft, compareVersions, discardDraft, listDeploymentRecords, listDrafts, putInForce, readDraft } from '../services/deployments.ts' // prettier-ignore
import type { DraftEdit } from '../services/deployments.ts'
import type { Caller } from '../services/sessions.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const read = 'stationSetUp.read'
const change = 'stationSetUp.change'
const stationInPath = z.object({ stationId: idInPath })
const draftInPath = z.object({ stationId: idInPath, draftId: idInPath })
const station = '/api/stations/:stationId'
/** A large array takes its time on a busy machine. */
const checkDeadline = 20_000

function withTag(response: Response, draft: DeploymentDraftView): DeploymentDraftView {
  response.set('ETag', `"${draft.version}"`)
  return draft
}

const editOf = (params: z.infer<typeof draftInPath>, request: Request, { person }: Caller): DraftEdit => ({
  ...params,
  version: versionIn(request),
  personId: person.id,
})

export const deploymentRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: `${station}/deployments/history`,
    action: read,
    summary: 'All versions of the array with author, reason and sensors, newest first; corrections of the past too',
    params: stationInPath,
    answer: z.array(deploymentRecord),
    handle: ({ params }) => listDeploymentRecords(parts, params.stationId),
  }),
  route({
    method: 'get',
    path: `${station}/deployments/:deploymentId/comparison/:otherId`,
    action: read,
    summary: 'What changed from one version to another, sensor by sensor',
    params: stationInPath.extend({ deploymentId: idInPath, otherId: idInPath }),
    answer: deploymentComparison,
    handle: ({ params }) => compareVersions(parts, params.stationId, params.deploymentId, params.otherId),
  }),
  route({
    method: 'get',
    path: `${station}/deploymentDrafts`,
    action: read,
    summary: 'Drafts that are open',
    params: stationInPath,
    answer: z.array(deploymentDraftView),
    handle: ({ params }) => listDrafts(params.stationId),
  }),
  route({
    method: 'post',
    path: `${station}/deploymentDrafts`,
    action: change,
    summary: 'Begin a draft, empty or as a copy of a version; or a correction of the past',
    params: stationInPath,
    body: deploymentDraftOrder,
    answer: deploymentDraftView,
    status: 201,
    handle: async ({ params, body, caller, response }) =>
      withTag(response, await addDraft(parts, params.stationId, body, caller.person.id)),
  }),
  route({
    method: 'get',
    path: `${station}/deploymentDrafts/:draftId`,
    action: read,
    summary: 'One draft',
    params: draftInPath,
    answer: deploymentDraftView,
    handle: async ({ params, response }) => withTag(response, await readDraft(params.stationId, params.draftId)),
  }),
  route({
    method: 'put',
    path: `${station}/deploymentDrafts/:draftId`,
    action: change,
    summary: 'Change a draft; needs If-Match with its version',
    params: draftInPath,
    body: deploymentDraftContent,
    answer: deploymentDraftView,
    handle: async ({ params, body, caller, request, response }) =>
      withTag(response, await changeDraft(parts, editOf(params, request, caller), body)),
  }),
  route({
    method: 'delete',
    path: `${station}/deploymentDrafts/:draftId`,
    action: change,
    summary: 'Throw a draft away; needs If-Match',
    params: draftInPath,
    handle: ({ params, caller, request }) => discardDraft(parts, editOf(params, request, caller)),
  }),
  route({
    method: 'get',
    path: `${station}/deploymentDrafts/:draftId/designCheck`,
    action: read,
    summary: 'What the array of a draft can read, and what speaks against it',
    params: draftInPath,
    answer: designCheck,
    deadlineMilliseconds: checkDeadline,
    handle: ({ params }) => checkDraft(parts, params.stationId, params.draftId),
  }),
  route({
    method: 'post',
    path: `${station}/deploymentDrafts/:draftId/putInForce`,
    action: change,
    summary: 'Put a draft in force with a reason, and one for each check that is not good; needs If-Match',
    params: draftInPath,
    body: deploymentOrder,
    answer: deploymentRecord,
    status: 201,
    deadlineMilliseconds: checkDeadline,
    handle: ({ params, body, caller, request }) => putInForce(parts, editOf(params, request, caller), body),
  }),
  route({
    method: 'post',
    path: `${station}/surveyPreviews`,
    // It changes nothing, but only who may enter a survey has one to try.
    action: change,
    summary: 'What a survey file holds and what is wrong with it, line by line',
    params: stationInPath,
    body: surveyQuestion,
    answer: surveyPreview,
    handle: async ({ body }) => readSurvey(body.text, body.mapping, body.defaults),
  }),
]
