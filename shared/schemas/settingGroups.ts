/** Settings of the installation as an administrator changes them, group by group, with their versions. */
import { z } from 'zod'
import { personName } from './limit.ts'

const time = z.iso.datetime()
const content = z.record(z.string(), z.unknown())

export const settingVersionView = z.object({
  group: z.string(),
  /** Counts from 1, which is what held before anybody set it. For If-Match. */
  number: z.number().int(),
  content,
  /** Null: from the beginning. */
  validFrom: time.nullable(),
  /** Null: the program itself. */
  author: personName.nullable(),
  reason: z.string().nullable(),
})
export type SettingVersionView = z.infer<typeof settingVersionView>
export const settingVersions = z.object({ settings: z.array(settingVersionView) })

export const settingChange = z.strictObject({ content, reason: z.string().trim().min(3).max(500) })
export type SettingChange = z.infer<typeof settingChange>
/** Puts the content of an older version in force again, as a new version. */
export const settingReturn = z.strictObject({
  number: z.number().int().positive(),
  reason: z.string().trim().min(3).max(500),
})
export type SettingReturn = z.infer<typeof settingReturn>
