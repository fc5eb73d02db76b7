/** E-mail programs know no style sheets of ours: the day's colours, written out. */
import type { Priority } from '../../../shared/schemas/limit.ts'

export const colours = {
  paper: '#EFF3F2',
  sheet: '#FAFCFB',
  ink: '#0F262C',
  ink2: '#384F55',
  rule: '#B4C3C4',
  wave: '#2A3796',
  act: '#0A5866',
}

export const priorityColours: Record<Priority, { ink: string; wash: string }> = {
  low: { ink: '#385A78', wash: '#E1E9EF' },
  medium: { ink: '#735800', wash: '#F3ECD6' },
  high: { ink: '#A34100', wash: '#F8E9DD' },
  urgent: { ink: '#B01030', wash: '#F8E3E4' },
}
