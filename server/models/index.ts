/** All tables of the database, one file each. Initialised once for the process by `defineModels`. */
import type { Sequelize } from 'sequelize'
import { defineAbsence } from './absence.ts'
import { defineAlert } from './alert.ts'
import { defineAlertEvent } from './alertEvent.ts'
import { defineAttachment } from './attachment.ts'
import { defineAudit } from './audit.ts'
import { defineAuditCheck } from './auditCheck.ts'
import { defineAuxiliaryReading } from './auxiliaryReading.ts'
import { defineBackupRun } from './backupRun.ts'
import { defineBulletin } from './bulletin.ts'
import { defineClockOffset } from './clockOffset.ts'
import { defineConfigurationRun } from './configurationRun.ts'
import { defineConflict } from './conflict.ts'
import { defineDatabaseSize } from './databaseSize.ts'
import { defineDelivery } from './delivery.ts'
import { defineDeployment } from './deployment.ts'
import { defineDeploymentDraft } from './deploymentDraft.ts'
import { defineDeploymentSensor } from './deploymentSensor.ts'
import { defineDirtyWindow } from './dirtyWindow.ts'
import { defineDistributionList } from './distributionList.ts'
import { defineEscalation } from './escalation.ts'
import { defineEstimate } from './estimate.ts'
import { defineEstimateDetail } from './estimateDetail.ts'
import { defineFrame } from './frame.ts'
import { defineHandOver } from './handOver.ts'
import { defineImport } from './import.ts'
import { defineInstallation } from './installation.ts'
import { defineLimit } from './limit.ts'
import { defineLimitState } from './limitState.ts'
import { defineLimitVersion } from './limitVersion.ts'
import { defineLinkToken } from './linkToken.ts'
import { defineListMember } from './listMember.ts'
import { defineLogEntry } from './logEntry.ts'
import { defineLongJob } from './longJob.ts'
import { defineMessage } from './message.ts'
import { defineNotice } from './notice.ts'
import { defineObservation } from './observation.ts'
import { defineOutlook } from './outlook.ts'
import { definePerson } from './person.ts'
import { definePlace } from './place.ts'
import { definePlaceSettings } from './placeSettings.ts'
import { defineReadingBlock } from './readingBlock.ts'
import { defineRecoveryCode } from './recoveryCode.ts'
import { defineRun } from './run.ts'
import { defineSensor } from './sensor.ts'
import { defineSeriesDay } from './seriesDay.ts'
import { defineSession } from './session.ts'
import { defineSettingVersion } from './settingVersion.ts'
import { defineShelving } from './shelving.ts'
import { defineStation } from './station.ts'
import { defineStationHealthHour } from './stationHealthHour.ts'
import { defineStationKey } from './stationKey.ts'
import { defineStationSettings } from './stationSettings.ts'
import { defineStream } from './stream.ts'
import { defineUpload } from './upload.ts'
import { defineWatch } from './watch.ts'
import { defineWatermark } from './watermark.ts'

export { Absence } from './absence.ts'
export { Alert } from './alert.ts'
export { AlertEvent } from './alertEvent.ts'
export { Attachment } from './attachment.ts'
export { Audit } from './audit.ts'
export { AuditCheck } from './auditCheck.ts'
export { AuxiliaryReading } from './auxiliaryReading.ts'
export { BackupRun } from './backupRun.ts'
export { Bulletin } from './bulletin.ts'
export { ClockOffset } from './clockOffset.ts'
export { ConfigurationRun } from './configurationRun.ts'
export { Conflict } from './conflict.ts'
export { DatabaseSize } from './databaseSize.ts'
export { Delivery } from './delivery.ts'
export { Deployment } from './deployment.ts'
export { DeploymentDraft } from './deploymentDraft.ts'
export { DeploymentSensor } from './deploymentSensor.ts'
export { DirtyWindow } from './dirtyWindow.ts'
export { DistributionList } from './distributionList.ts'
export { Escalation } from './escalation.ts'
export { Estimate } from './estimate.ts'
export { EstimateDetail } from './estimateDetail.ts'
export { Frame } from './frame.ts'
export { HandOver } from './handOver.ts'
export { Import } from './import.ts'
export { Installation } from './installation.ts'
export { Limit } from './limit.ts'
export { LimitState } from './limitState.ts'
export { LimitVersion } from './limitVersion.ts'
export { LinkToken } from './linkToken.ts'
export { ListMember } from './listMember.ts'
export { LogEntry } from './logEntry.ts'
export { LongJob } from './longJob.ts'
export { Message } from './message.ts'
export { Notice } from './notice.ts'
export { Observation } from './observation.ts'
export { Outlook } from './outlook.ts'
export { Person } from './person.ts'
export { Place } from './place.ts'
export { PlaceSettings } from './placeSettings.ts'
export { ReadingBlock } from './readingBlock.ts'
export { RecoveryCode } from './recoveryCode.ts'
export { Run } from './run.ts'
export { Sensor } from './sensor.ts'
export { SeriesDay } from './seriesDay.ts'
export { Session } from './session.ts'
export { SettingVersion } from './settingVersion.ts'
export { Shelving } from './shelving.ts'
export { Station } from './station.ts'
export { StationHealthHour } from './stationHealthHour.ts'
export { StationKey } from './stationKey.ts'
export { StationSettings } from './stationSettings.ts'
export { Stream } from './stream.ts'
export { Upload } from './upload.ts'
export { Watch } from './watch.ts'
export { Watermark } from './watermark.ts'

const definitions = [
  defineAbsence,
  defineAlert,
  defineAlertEvent,
  defineAttachment,
  defineAudit,
  defineAuditCheck,
  defineAuxiliaryReading,
  defineBackupRun,
  defineBulletin,
  defineClockOffset,
  defineConfigurationRun,
  defineConflict,
  defineDatabaseSize,
  defineDelivery,
  defineDeployment,
  defineDeploymentDraft,
  defineDeploymentSensor,
  defineDirtyWindow,
  defineDistributionList,
  defineEscalation,
  defineEstimate,
  defineEstimateDetail,
  defineFrame,
  defineHandOver,
  defineImport,
  defineInstallation,
  defineLimit,
  defineLimitState,
  defineLimitVersion,
  defineLinkToken,
  defineListMember,
  defineLogEntry,
  defineLongJob,
  defineMessage,
  defineNotice,
  defineObservation,
  defineOutlook,
  definePerson,
  definePlace,
  definePlaceSettings,
  defineReadingBlock,
  defineRecoveryCode,
  defineRun,
  defineSensor,
  defineSeriesDay,
  defineSession,
  defineSettingVersion,
  defineShelving,
  defineStation,
  defineStationHealthHour,
  defineStationKey,
  defineStationSettings,
  defineStream,
  defineUpload,
  defineWatch,
  defineWatermark,
]

export function defineModels(sequelize: Sequelize): void {
  for (const define of definitions) define(sequelize)
}
