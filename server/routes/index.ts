/** All routes, one line a feature. */
import type { Parts } from '../config/parts.ts'
import { sessionCookieName } from '../config/sessionCookie.ts'
import { accountRoutes } from './accounts.ts'
import { alertRoutes } from './alerts.ts'
import { auditRoutes } from './audits.ts'
import { auxiliaryRoutes } from './auxiliary.ts'
import { bulletinRoutes } from './bulletins.ts'
import { capRoutes } from './cap.ts'
import { clockOffsetRoutes } from './clockOffsets.ts'
import { deploymentRoutes } from './deployments.ts'
import { configurationRoutes } from './configuration.ts'
import { installationRoutes } from './installation.ts'
import { jobRoutes } from './jobs.ts'
import { limitRoutes } from './limits.ts'
import { listRoutes } from './lists.ts'
import { logRoutes } from './log.ts'
import { messageRoutes } from './messages.ts'
import { noticeRoutes } from './notices.ts'
import { observationRoutes } from './observations.ts'
import { withOpenApi } from './openApi.ts'
import { ownAccountRoutes } from './ownAccount.ts'
import { passphraseLinkRoutes } from './passphraseLinks.ts'
import { peopleRoutes } from './people.ts'
import { placeRoutes } from './places.ts'
import { receiptRoutes } from './receipts.ts'
import type { Route } from './registry.ts'
import { secondFactorRoutes } from './secondFactor.ts'
import { runRoutes } from './runs.ts'
import { sensorRoutes } from './sensors.ts'
import { sessionRoutes } from './session.ts'
import { settingVersionRoutes } from './settingVersions.ts'
import { settingsRoutes } from './settings.ts'
import { setUpRoutes } from './setUp.ts'
import { systemRoutes } from './system.ts'
import { stationHealthRoutes } from './stationHealth.ts'
import { stationKeyRoutes } from './stationKeys.ts'
import { stationSetUpRoutes } from './stationSetUp.ts'
import { stationRoutes } from './stations.ts'
import { watchRulesRoutes } from './watchRules.ts'
import { uploadRoutes } from './uploads.ts'
import { watchRoutes } from './watches.ts'

const features: ((parts: Parts) => Route[])[] = [
  installationRoutes,
  sessionRoutes,
  setUpRoutes,
  settingsRoutes,
  jobRoutes,
  stationRoutes,
  stationSetUpRoutes,
  deploymentRoutes,
  sensorRoutes,
  uploadRoutes,
  auxiliaryRoutes,
  stationKeyRoutes,
  stationHealthRoutes,
  runRoutes,
  clockOffsetRoutes,
  limitRoutes,
  alertRoutes,
  capRoutes,
  messageRoutes,
  listRoutes,
  peopleRoutes,
  accountRoutes,
  ownAccountRoutes,
  secondFactorRoutes,
  passphraseLinkRoutes,
  auditRoutes,
  settingVersionRoutes,
  systemRoutes,
  configurationRoutes,
  receiptRoutes,
  bulletinRoutes,
  logRoutes,
  watchRoutes,
  placeRoutes,
  noticeRoutes,
  observationRoutes,
  watchRulesRoutes,
]

export const allRoutes = (parts: Parts): Route[] =>
  withOpenApi(
    features.flatMap((routes) => routes(parts)),
    sessionCookieName(parts.environment),
  )
