import type { Request } from 'express'
import { versionMissing } from '../services/problems.ts'

/** The version that a change was made from, out of `If-Match: "7"`; throws the 428. */
export function versionIn(request: Request): number {
  const [, version] = /^(?:W\/)?"?([1-9]\d{0,9})"?$/.exec(request.get('if-match') ?? '') ?? []
  if (version === undefined) throw versionMissing()
  return Number(version)
}
