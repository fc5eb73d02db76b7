import type { PersonView, ProfileChange } from '../../../shared/schemas/person.ts'

/** What of a person stands in the form. */
export const mailSideOf = ({ hours, deputy, absences }: PersonView): ProfileChange => ({
  hours,
  deputyId: deputy?.id ?? null,
  absences: absences.map(({ startsAt, endsAt }) => ({ startsAt, endsAt })),
})
