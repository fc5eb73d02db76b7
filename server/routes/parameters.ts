/** Parameters as they stand in a path or query: text that is checked and turned into what it means. */
import { z } from 'zod'

/** A row's number. */
export const idInPath = z
  .string()
  .regex(/^[1-9]\d{0,9}$/, 'must be a whole number')
  .transform(Number)
