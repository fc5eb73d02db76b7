/** Who is signed in at this browser, and what the server still lets this session do. */
import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import { may } from '../../shared/access.ts'
import type { Action } from '../../shared/access.ts'
import type { InstallationView, SessionView, SetUpRequest, SignInRequest } from '../../shared/schemas/session.ts'
import type { Preferences, PreferencesChange } from '../../shared/schemas/preferences.ts'
import { changePreferences } from '../api/accounts.ts'
import * as api from '../api/session.ts'
import { useDisplay } from './display.ts'
import { useServerClock } from './serverClock.ts'

/** `unknown` until the server was asked; `ended` when a session that was shown here is over. */
export type SessionState = 'unknown' | 'out' | 'in' | 'ended'

export const useSession = defineStore('session', () => {
  const clock = useServerClock()
  const display = useDisplay()
  const state = ref<SessionState>('unknown')
  const view = shallowRef<SessionView | null>(null)
  /** As the server keeps them. */
  const preferences = shallowRef<Preferences | null>(null)
  const readOnly = ref(false)
  const installation = shallowRef<InstallationView | null>(null)

  /** A second factor is to be set up before anything else. */
  const mustEnrol = computed(() => view.value?.mustEnrol ?? false)
  const person = computed(() => view.value?.person ?? null)
  const isDemonstration = computed(() => installation.value?.kind === 'demonstration')
  /** May the person see or do this; a read-only session is asked again by the server itself. */
  const allows = (action: Action): boolean => may(person.value?.role ?? null, action)

  function apply(next: SessionView): void {
    clock.hear(Date.parse(next.serverTime))
    view.value = next
    readOnly.value = next.readOnly
    state.value = 'in'
    preferences.value = next.preferences
    display.take(next.preferences)
  }

  /** Keeps choices of this person on the server; the screen shows them already. */
  async function keepPreferences(change: PreferencesChange): Promise<void> {
    preferences.value = await changePreferences(change)
  }

  /** Asks the server who this is; throws where no answer comes. */
  async function restore(): Promise<void> {
    const found = await api.readSession()
    if (found) apply(found)
    else if (state.value === 'unknown') state.value = 'out'
    else if (state.value === 'in') end()
  }

  async function readInstallation(): Promise<void> {
    const found = await api.readInstallation()
    clock.hear(Date.parse(found.serverTime))
    installation.value = found
  }

  async function signIn(credentials: SignInRequest): Promise<void> {
    apply(await api.signIn(credentials))
  }

  async function completeSetUp(details: SetUpRequest): Promise<void> {
    await api.completeSetUp(details)
    await readInstallation()
  }

  async function signOut(): Promise<void> {
    await api.signOut()
    view.value = null
    state.value = 'out'
  }

  /** The absolute limit is passed: everything stays visible, nothing can be changed until the person signs in again. */
  function becomeReadOnly(): void {
    readOnly.value = true
  }

  function end(): void {
    if (state.value === 'in') state.value = 'ended'
  }

  return {
    state,
    view,
    person,
    mustEnrol,
    preferences,
    readOnly,
    installation,
    isDemonstration,
    allows,
    apply,
    keepPreferences,
    restore,
    readInstallation,
    signIn,
    completeSetUp,
    signOut,
    becomeReadOnly,
    end,
  }
})
