import { auditChoices, auditPage, auditVerification, latestVerification } from '../../shared/schemas/audit.ts'
import type { AuditChoices, AuditPage, AuditVerification } from '../../shared/schemas/audit.ts'
import { appliedConfiguration, appliedConfigurations, comparison } from '../../shared/schemas/configuration.ts'
import type {
  AppliedConfiguration,
  Comparison,
  Configuration,
  ConfigurationOrder,
} from '../../shared/schemas/configuration.ts'
import { settingVersions, settingVersionView } from '../../shared/schemas/settingGroups.ts'
import type { SettingChange, SettingReturn, SettingVersionView } from '../../shared/schemas/settingGroups.ts'
import { systemView } from '../../shared/schemas/system.ts'
import type { SystemView } from '../../shared/schemas/system.ts'
import { request } from './request.ts'

/** As it stands in the address; empty ones are left out. */
export interface AuditQuery {
  personId?: string
  entity?: string
  action?: string
  from?: string
  to?: string
}

const queryOf = (query: AuditQuery & { before?: string }): string => {
  const given = Object.entries(query).filter(([, value]) => value)
  return given.length > 0
    ? `?${new URLSearchParams(given.map(([name, value]) => [name, String(value)])).toString()}`
    : ''
}

export const readAudits = (query: AuditQuery, before: number | null): Promise<AuditPage> =>
  request('GET', `/api/audits${queryOf({ ...query, ...(before !== null && { before: String(before) }) })}`, auditPage)
export const auditFilePath = (query: AuditQuery): string => `/api/audits/file${queryOf(query)}`
export const readAuditChoices = (): Promise<AuditChoices> => request('GET', '/api/audits/choices', auditChoices)
export const readVerification = async (): Promise<AuditVerification | null> =>
  (await request('GET', '/api/audits/verification', latestVerification)).verification
export const verifyAudit = (): Promise<AuditVerification> =>
  request('POST', '/api/audits/verification', auditVerification)

export const readSettingGroups = async (): Promise<SettingVersionView[]> =>
  (await request('GET', '/api/settings/groups', settingVersions)).settings
export const readSettingVersions = async (group: string): Promise<SettingVersionView[]> =>
  (await request('GET', `/api/settings/groups/${group}`, settingVersions)).settings
export const changeSettings = (group: string, version: number, change: SettingChange): Promise<SettingVersionView> =>
  request('PUT', `/api/settings/groups/${group}`, settingVersionView, change, version)
export const returnSettings = (group: string, version: number, to: SettingReturn): Promise<SettingVersionView> =>
  request('POST', `/api/settings/groups/${group}/return`, settingVersionView, to, version)

export const readSystem = (): Promise<SystemView> => request('GET', '/api/system', systemView)

export const compareConfiguration = (file: Configuration): Promise<Comparison> =>
  request('POST', '/api/configuration/comparison', comparison, file)
export const readApplied = async (): Promise<AppliedConfiguration[]> =>
  (await request('GET', '/api/configuration/applied', appliedConfigurations)).applied
export const applyConfiguration = (order: ConfigurationOrder): Promise<AppliedConfiguration> =>
  request('POST', '/api/configuration/applied', appliedConfiguration, order)
export const rollBackConfiguration = (id: number, reason: string): Promise<AppliedConfiguration> =>
  request('POST', `/api/configuration/applied/${id}/roll-back`, appliedConfiguration, { reason })
