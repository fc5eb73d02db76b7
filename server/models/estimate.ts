import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** The wave vector of one window and what goes with it. Current: the highest revision of run 0. Directions are toward, degrees true; SI units. */
export class Estimate extends Model<InferAttributes<Estimate>, InferCreationAttributes<Estimate>> {
  declare stationId: number
  declare windowEndsAt: Date
  declare runId: number
  declare revision: number
  declare windowStartsAt: Date
  declare surgeStartsAt: Date | null
  declare computedAt: Date
  declare origin: 'live' | 'late' | 'import' | 'recompute' | 'demonstration'
  declare deploymentId: number
  declare settingsId: number
  declare softwareVersion: string
  declare inputCommitId: number | null
  declare resultDigest: string
  declare completeness: number
  declare resolved: boolean
  declare reason: string | null
  declare qualityFlag: number
  declare waterDepth: number
  declare waterDepthSource: CreationOptional<'level' | 'tide' | 'nominal'>
  declare sensorsUsed: number
  declare sensorsDeployed: number
  declare significantWaveHeight: number | null
  declare significantWaveHeightSd: number | null
  declare peakPeriod: number | null
  declare meanPeriod: number | null
  declare energyPeriod: number | null
  declare energyFlux: number | null
  declare surgeHeight: number | null
  declare height: number | null
  declare period: number | null
  declare towardDegrees: number | null
  declare towardDegreesSd: number | null
  declare measuredSpeed: number | null
  declare speed: number | null
  declare speedSd: number | null
  declare linearSpeed: number | null
  declare directionalSpread: number | null
  declare slownessEast: number | null
  declare slownessNorth: number | null
  declare covarianceEastEast: number | null
  declare covarianceEastNorth: number | null
  declare covarianceNorthNorth: number | null
  /** Of the highest swell, and of the wind sea. */
  declare swellHeight: number | null
  declare swellPeriod: number | null
  declare swellTowardDegrees: number | null
  declare swellTowardDegreesSd: number | null
  declare swellSpeed: number | null
  declare swellSpeedSd: number | null
  declare windSeaHeight: number | null
  declare windSeaPeriod: number | null
  declare windSeaTowardDegrees: number | null
  declare windSeaTowardDegreesSd: number | null
  declare windSeaSpeed: number | null
  declare windSeaSpeedSd: number | null
}

export const defineEstimate = (sequelize: Sequelize): void => {
  Estimate.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowEndsAt: { type: DataTypes.DATE(3), primaryKey: true },
      runId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      revision: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowStartsAt: { type: DataTypes.DATE(3), allowNull: false },
      surgeStartsAt: DataTypes.DATE(3),
      computedAt: { type: DataTypes.DATE(3), allowNull: false },
      origin: { type: DataTypes.ENUM('live', 'late', 'import', 'recompute', 'demonstration'), allowNull: false },
      deploymentId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      settingsId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      softwareVersion: { type: DataTypes.STRING(40), allowNull: false },
      inputCommitId: DataTypes.BIGINT.UNSIGNED,
      resultDigest: { type: DataTypes.STRING(64), allowNull: false },
      completeness: { type: DataTypes.DOUBLE, allowNull: false },
      resolved: { type: DataTypes.BOOLEAN, allowNull: false },
      reason: DataTypes.STRING(40),
      qualityFlag: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
      waterDepth: { type: DataTypes.DOUBLE, allowNull: false },
      waterDepthSource: { type: DataTypes.ENUM('level', 'tide', 'nominal'), allowNull: false, defaultValue: 'nominal' },
      sensorsUsed: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sensorsDeployed: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      significantWaveHeight: DataTypes.DOUBLE,
      significantWaveHeightSd: DataTypes.DOUBLE,
      peakPeriod: DataTypes.DOUBLE,
      meanPeriod: DataTypes.DOUBLE,
      energyPeriod: DataTypes.DOUBLE,
      energyFlux: DataTypes.DOUBLE,
      surgeHeight: DataTypes.DOUBLE,
      height: DataTypes.DOUBLE,
      period: DataTypes.DOUBLE,
      towardDegrees: DataTypes.DOUBLE,
      towardDegreesSd: DataTypes.DOUBLE,
      measuredSpeed: DataTypes.DOUBLE,
      speed: DataTypes.DOUBLE,
      speedSd: DataTypes.DOUBLE,
      linearSpeed: DataTypes.DOUBLE,
      directionalSpread: DataTypes.DOUBLE,
      slownessEast: DataTypes.DOUBLE,
      slownessNorth: DataTypes.DOUBLE,
      covarianceEastEast: DataTypes.DOUBLE,
      covarianceEastNorth: DataTypes.DOUBLE,
      covarianceNorthNorth: DataTypes.DOUBLE,
      swellHeight: DataTypes.DOUBLE,
      swellPeriod: DataTypes.DOUBLE,
      swellTowardDegrees: DataTypes.DOUBLE,
      swellTowardDegreesSd: DataTypes.DOUBLE,
      swellSpeed: DataTypes.DOUBLE,
      swellSpeedSd: DataTypes.DOUBLE,
      windSeaHeight: DataTypes.DOUBLE,
      windSeaPeriod: DataTypes.DOUBLE,
      windSeaTowardDegrees: DataTypes.DOUBLE,
      windSeaTowardDegreesSd: DataTypes.DOUBLE,
      windSeaSpeed: DataTypes.DOUBLE,
      windSeaSpeedSd: DataTypes.DOUBLE,
    },
    { sequelize, tableName: 'estimates' },
  )
}
