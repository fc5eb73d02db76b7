/** Distribution lists and people as recipients. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import type { ListContent, ListView } from '../../shared/schemas/distributionList.ts'
import type { PersonChange, PersonView, ProfileChange, RecipientDraft } from '../../shared/schemas/person.ts'
import type { PersonName } from '../../shared/schemas/limit.ts'
import * as api from '../api/lists.ts'

export const useLists = defineStore('lists', () => {
  const held = shallowReactive(new Map<number, ListView>())
  const peopleHeld = shallowReactive(new Map<number, PersonView>())
  const profile = shallowRef<PersonView | null>(null)
  /** Who could be told instead of who is signed in. */
  const deputies = shallowRef<PersonName[]>([])
  const loaded = ref(false)

  const all = computed(() =>
    [...held.values()].filter((list) => list.retiredAt === null).sort((a, b) => a.name.localeCompare(b.name)),
  )
  const people = computed(() => [...peopleHeld.values()].sort((a, b) => a.name.localeCompare(b.name)))
  const byId = (id: number): ListView | undefined => held.get(id)

  async function read(): Promise<void> {
    const lists = await api.readLists()
    held.clear()
    for (const list of lists) held.set(list.id, list)
    loaded.value = true
  }
  async function readPeople(): Promise<void> {
    const found = await api.readPeople()
    peopleHeld.clear()
    for (const person of found) peopleHeld.set(person.id, person)
  }
  /** Null: a new list. The answer is its number. */
  async function save(list: ListView | null, content: ListContent): Promise<number> {
    const saved = list ? await api.changeList(list.id, list.version, content) : await api.addList(content)
    held.set(saved.id, saved)
    return saved.id
  }
  async function retire(list: ListView): Promise<void> {
    await api.retireList(list.id, list.version)
    held.delete(list.id)
  }
  async function addRecipient(draft: RecipientDraft): Promise<void> {
    const person = await api.addRecipient(draft)
    peopleHeld.set(person.id, person)
  }
  async function changePerson(person: PersonView, change: PersonChange): Promise<void> {
    const changed = await api.changePerson(person.id, person.version, change)
    peopleHeld.set(changed.id, changed)
  }
  async function changeMailSide(person: PersonView, change: ProfileChange): Promise<void> {
    const changed = await api.changeMailSide(person.id, person.version, change)
    peopleHeld.set(changed.id, changed)
    if (profile.value?.id === changed.id) profile.value = changed
  }
  async function readProfile(): Promise<void> {
    const answers = await Promise.all([api.readProfile(), api.readDeputies()])
    profile.value = answers[0]
    deputies.value = answers[1]
  }
  async function changeProfile(change: ProfileChange): Promise<void> {
    if (!profile.value) return
    profile.value = await api.changeProfile(profile.value.version, change)
    if (peopleHeld.has(profile.value.id)) peopleHeld.set(profile.value.id, profile.value)
  }
  async function leaveList(id: number): Promise<void> {
    await api.leaveList(id)
    await readProfile()
  }

  return {
    ...{ all, people, profile, deputies, loaded, byId, read, readPeople, save, retire, addRecipient, changePerson },
    ...{ changeMailSide, readProfile, changeProfile, leaveList },
  }
})
