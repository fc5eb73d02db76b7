/**
 * The whole configuration as one text file. Settings, people and lists can be put in force from such a file; stations,
 * deployments and limits stand in it to be kept and compared, and are changed where their own checks are: on Set-up, and
 * by the watch on Limits. Secrets (passphrases, second factors, keys of stations) are never in it.
 */
import { z } from 'zod'
import { listContent, listMember } from './distributionList.ts'
import { personName, timeSpan } from './limit.ts'
import { role, team } from './session.ts'

const time = z.iso.datetime()

/** By address, in small letters. */
export const configuredPerson = z.strictObject({
  name: z
    .string()
    .trim()
    .min(1)
    .max(80)
    .regex(/^[^\p{Cc}]*$/u, 'must be one line'),
  role: role.nullable(),
  team: team.nullable(),
  timeZone: z.string().min(1).max(60),
  hours: timeSpan.shape.hours,
  /** Address of the deputy. */
  deputy: z.string().nullable(),
  isDisabled: z.boolean(),
})
export type ConfiguredPerson = z.infer<typeof configuredPerson>

/** By name; members by their address. */
export const configuredList = listContent.omit({ name: true, members: true }).extend({
  members: z.array(listMember.omit({ personId: true }).extend({ person: z.string() })).max(200),
})
export type ConfiguredList = z.infer<typeof configuredList>

const content = z.record(z.string(), z.unknown())

export const configuration = z.object({
  format: z.literal('offing.configuration.1'),
  exportedAt: time,
  software: z.string(),
  settings: z.record(z.string(), content),
  people: z.record(z.string(), configuredPerson),
  lists: z.record(z.string(), configuredList),
  /** By code: the station, its settings and the array in force. */
  stations: z.record(z.string(), content),
  /** By subject and title. */
  limits: z.record(z.string(), content),
})
export type Configuration = z.infer<typeof configuration>

export const configurationKind = z.enum(['settings', 'people', 'lists', 'stations', 'limits'])
export type ConfigurationKind = z.infer<typeof configurationKind>

export const configurationChange = z.object({
  kind: configurationKind,
  key: z.string(),
  /** `absent`: not in the file, and left as it is. */
  what: z.enum(['add', 'change', 'absent']),
  /** Whether the file can put it in force. */
  applies: z.boolean(),
  fields: z.array(z.object({ path: z.string(), before: z.string().nullable(), after: z.string().nullable() })),
})
export type ConfigurationChange = z.infer<typeof configurationChange>

export const comparison = z.object({
  changes: z.array(configurationChange),
  /** Of what the file was compared with; to be given back with the order, so that nothing changed meanwhile. */
  basis: z.string(),
})
export type Comparison = z.infer<typeof comparison>

export const configurationOrder = z.strictObject({
  file: configuration,
  basis: z.string().min(1).max(100),
  reason: z.string().trim().min(3).max(500),
})
export type ConfigurationOrder = z.infer<typeof configurationOrder>

export const appliedConfiguration = z.object({
  id: z.number().int(),
  at: time,
  person: personName.nullable(),
  reason: z.string(),
  count: z.number().int(),
  rolledBackAt: time.nullable(),
})
export type AppliedConfiguration = z.infer<typeof appliedConfiguration>
export const appliedConfigurations = z.object({ applied: z.array(appliedConfiguration) })
