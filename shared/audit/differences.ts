/** What a change changed, leaf by leaf, in words a person reads. */

export interface Difference {
  /** `condition.raise`; `content` where there is no field. */
  path: string
  /** Null: was not there. */
  before: string | null
  after: string | null
}

const longest = 200

function written(value: unknown): string {
  const text = typeof value === 'string' ? value : JSON.stringify(value)
  return text.length > longest ? `${text.slice(0, longest)} …` : text
}

const isBranch = (value: unknown): value is Record<string, unknown> => value !== null && typeof value === 'object'

/** All leaves of a value; an empty list or object is a leaf. */
function leaves(value: unknown, path: string, found: Map<string, unknown>): Map<string, unknown> {
  const fields = isBranch(value) ? Object.entries(value) : []
  if (fields.length === 0) {
    if (value !== undefined && !(path === '' && value === null)) found.set(path === '' ? 'content' : path, value)
    return found
  }
  for (const [name, field] of fields) leaves(field, path === '' ? name : `${path}.${name}`, found)
  return found
}

/** In the order of the newer value; what went comes last. Equal leaves are left out. */
export function differences(before: unknown, after: unknown): Difference[] {
  const [old, fresh] = [leaves(before, '', new Map()), leaves(after, '', new Map())]
  const paths = [...fresh.keys(), ...[...old.keys()].filter((path) => !fresh.has(path))]
  return paths.flatMap((path) => {
    const [was, is] = [old, fresh].map((side) => (side.has(path) ? written(side.get(path)) : null))
    return was === is ? [] : [{ path, before: was ?? null, after: is ?? null }]
  })
}

/** `stationKey.issue` as `station key: issue`; `person.sendReset` as `person: send reset`. */
export const actionWords = (action: string): string =>
  action
    .replace(/([a-z])([A-Z])/g, (_, end: string, start: string) => `${end} ${start.toLowerCase()}`)
    .replace('.', ': ')
