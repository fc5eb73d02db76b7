/** What a configuration's file would change, thing by thing and field by field. Pure. */
import { differences } from '../audit/differences.ts'
import type { Configuration, ConfigurationChange, ConfigurationKind } from '../schemas/configuration.ts'

/** In the order in which they are put in force: lists name people. */
export const appliedKinds: readonly ConfigurationKind[] = ['settings', 'people', 'lists']
const comparedKinds: readonly ConfigurationKind[] = ['stations', 'limits']

export type ConfigurationContent = Pick<Configuration, ConfigurationKind>

/** Nothing for what is the same; keys in the order of the alphabet. */
export function changesBetween(now: ConfigurationContent, wanted: ConfigurationContent): ConfigurationChange[] {
  return [...appliedKinds, ...comparedKinds].flatMap((kind) => {
    const keys = [...new Set([...Object.keys(wanted[kind]), ...Object.keys(now[kind])])].sort()
    return keys.flatMap((key): ConfigurationChange[] => {
      const [is, will] = [now[kind][key], wanted[kind][key]]
      const common = { kind, key, applies: appliedKinds.includes(kind) && will !== undefined }
      if (will === undefined) return [{ ...common, what: 'absent', fields: [] }]
      const fields = differences(is, will)
      if (is === undefined) return [{ ...common, what: 'add', fields }]
      return fields.length === 0 ? [] : [{ ...common, what: 'change', fields }]
    })
  })
}

/** The same content gives the same text: names of fields in the order of the alphabet, lists as they are. */
export function stableText(value: unknown): string {
  const sorted = (one: unknown): unknown => {
    if (Array.isArray(one)) return one.map(sorted)
    if (one === null || typeof one !== 'object') return one
    return Object.fromEntries(
      Object.entries(one)
        .sort(([a], [b]) => (a < b ? -1 : 1))
        .map(([name, field]) => [name, sorted(field)]),
    )
  }
  return `${JSON.stringify(sorted(value), null, 2)}\n`
}
