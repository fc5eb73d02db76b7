/** The short values of an outlook's row. */
import { z } from 'zod'
import type { OutlookValues } from '../../models/outlook.ts'
import { fromJson } from './rows.ts'

const number = z.number().nullable()
const shape = z.record(z.string(), z.tuple([z.number(), number, number, number, z.number()]))

export const valuesIn = (stored: unknown): OutlookValues => shape.parse(fromJson(stored))
