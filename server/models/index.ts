/** All tables of the database, one file each. Initialised once for the process by `defineModels`. */
import type { Sequelize } from 'sequelize'
import { defineAudit } from './audit.ts'
import { defineAuxiliaryReading } from './auxiliaryReading.ts'
import { defineClockOffset } from './clockOffset.ts'
import { defineConflict } from './conflict.ts'
import { defineDeployment } from './deployment.ts'
import { defineDeploymentSensor } from './deploymentSensor.ts'
import { defineDirtyWindow } from './dirtyWindow.ts'
import { defineEstimate } from './estimate.ts'
import { defineEstimateDetail } from './estimateDetail.ts'
import { defineFrame } from './frame.ts'
import { defineImport } from './import.ts'
import { defineInstallation } from './installation.ts'
import { defineLinkToken } from './linkToken.ts'
import { defineLogEntry } from './logEntry.ts'
import { defineLongJob } from './longJob.ts'
import { definePerson } from './person.ts'
import { defineReadingBlock } from './readingBlock.ts'
import { defineRun } from './run.ts'
import { defineSensor } from './sensor.ts'
import { defineSeriesDay } from './seriesDay.ts'
import { defineSession } from './session.ts'
import { defineSettingVersion } from './settingVersion.ts'
import { defineStation } from './station.ts'
import { defineStationHealthHour } from './stationHealthHour.ts'
import { defineStationKey } from './stationKey.ts'
import { defineStationSettings } from './stationSettings.ts'
import { defineStream } from './stream.ts'
import { defineWatermark } from './watermark.ts'

export { Audit } from './audit.ts'
export { AuxiliaryReading } from './auxiliaryReading.ts'
export { ClockOffset } from './clockOffset.ts'
export { Conflict } from './conflict.ts'
export { Deployment } from './deployment.ts'
export { DeploymentSensor } from './deploymentSensor.ts'
export { DirtyWindow } from './dirtyWindow.ts'
export { Estimate } from './estimate.ts'
export { EstimateDetail } from './estimateDetail.ts'
export { Frame } from './frame.ts'
export { Import } from './import.ts'
export { Installation } from './installation.ts'
export { LinkToken } from './linkToken.ts'
export { LogEntry } from './logEntry.ts'
export { LongJob } from './longJob.ts'
export { Person } from './person.ts'
export { ReadingBlock } from './readingBlock.ts'
export { Run } from './run.ts'
export { Sensor } from './sensor.ts'
export { SeriesDay } from './seriesDay.ts'
export { Session } from './session.ts'
export { SettingVersion } from './settingVersion.ts'
export { Station } from './station.ts'
export { StationHealthHour } from './stationHealthHour.ts'
export { StationKey } from './stationKey.ts'
export { StationSettings } from './stationSettings.ts'
export { Stream } from './stream.ts'
export { Watermark } from './watermark.ts'

const definitions = [
  defineAudit,
  defineAuxiliaryReading,
  defineClockOffset,
  defineConflict,
  defineDeployment,
  defineDeploymentSensor,
  defineDirtyWindow,
  defineEstimate,
  defineEstimateDetail,
  defineFrame,
  defineImport,
  defineInstallation,
  defineLinkToken,
  defineLogEntry,
  defineLongJob,
  definePerson,
  defineReadingBlock,
  defineRun,
  defineSensor,
  defineSeriesDay,
  defineSession,
  defineSettingVersion,
  defineStation,
  defineStationHealthHour,
  defineStationKey,
  defineStationSettings,
  defineStream,
  defineWatermark,
]

export function defineModels(sequelize: Sequelize): void {
  for (const define of definitions) define(sequelize)
}
