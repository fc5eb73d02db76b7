import { z } from 'zod'
import { listView } from '../../shared/schemas/distributionList.ts'
import type { ListContent, ListView } from '../../shared/schemas/distributionList.ts'
import { personName } from '../../shared/schemas/limit.ts'
import type { PersonName } from '../../shared/schemas/limit.ts'
import { personView } from '../../shared/schemas/person.ts'
import type { PersonChange, PersonView, ProfileChange, RecipientDraft } from '../../shared/schemas/person.ts'
import { request } from './request.ts'

export const readLists = async (): Promise<ListView[]> =>
  (await request('GET', '/api/lists', z.object({ lists: z.array(listView) }))).lists

export const addList = (content: ListContent): Promise<ListView> => request('POST', '/api/lists', listView, content)

export const changeList = (id: number, version: number, content: ListContent): Promise<ListView> =>
  request('PUT', `/api/lists/${id}`, listView, content, version)

export const retireList = async (id: number, version: number): Promise<void> => {
  await request('DELETE', `/api/lists/${id}`, z.unknown(), undefined, version)
}

export const readPeople = async (): Promise<PersonView[]> =>
  (await request('GET', '/api/people', z.object({ people: z.array(personView) }))).people

export const addRecipient = (draft: RecipientDraft): Promise<PersonView> =>
  request('POST', '/api/people', personView, draft)

export const changePerson = (id: number, version: number, change: PersonChange): Promise<PersonView> =>
  request('PUT', `/api/people/${id}`, personView, change, version)

/** Hours, deputy and absences of somebody else. */
export const changeMailSide = (id: number, version: number, change: ProfileChange): Promise<PersonView> =>
  request('PUT', `/api/people/${id}/mailSide`, personView, change, version)

/** Names of those who could be told instead of who is signed in. */
export const readDeputies = async (): Promise<PersonName[]> =>
  (await request('GET', '/api/profile/deputies', z.object({ people: z.array(personName) }))).people

export const readProfile = (): Promise<PersonView> => request('GET', '/api/profile', personView)

export const changeProfile = (version: number, change: ProfileChange): Promise<PersonView> =>
  request('PUT', '/api/profile', personView, change, version)

export const leaveList = async (id: number): Promise<void> => {
  await request('DELETE', `/api/profile/lists/${id}`, z.unknown())
}
