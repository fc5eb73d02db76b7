import { z } from 'zod'
import { accountView, ownSession, passphraseLinkView } from '../../shared/schemas/account.ts'
import type {
  AccountChange,
  AccountView,
  Invitation,
  OwnSession,
  PassphraseChange,
  PassphraseLinkView,
} from '../../shared/schemas/account.ts'
import { preferences } from '../../shared/schemas/preferences.ts'
import type { Preferences, PreferencesChange } from '../../shared/schemas/preferences.ts'
import { recoveryCodes, secondFactorOffer, secondFactorView } from '../../shared/schemas/secondFactor.ts'
import type { SecondFactorOffer, SecondFactorView } from '../../shared/schemas/secondFactor.ts'
import { request } from './request.ts'

const own = '/api/profile'
const factor = `${own}/second-factor`
const sessions = z.object({ sessions: z.array(ownSession) })
const nothing = z.unknown()

export const readAccounts = async (): Promise<AccountView[]> =>
  (await request('GET', '/api/accounts', z.object({ accounts: z.array(accountView) }))).accounts
export const invite = (invitation: Invitation): Promise<AccountView> =>
  request('POST', '/api/accounts', accountView, invitation)
export const changeAccount = (id: number, version: number, change: AccountChange): Promise<AccountView> =>
  request('PUT', `/api/accounts/${id}`, accountView, change, version)
export const setDisabled = (id: number, version: number, isDisabled: boolean): Promise<AccountView> =>
  request('POST', `/api/accounts/${id}/${isDisabled ? 'disable' : 'enable'}`, accountView, undefined, version)
export const sendLink = (id: number): Promise<AccountView> => request('POST', `/api/accounts/${id}/link`, accountView)
export const resetSecondFactor = (id: number): Promise<AccountView> =>
  request('DELETE', `/api/accounts/${id}/second-factor`, accountView)
export const readSessionsOf = async (id: number): Promise<OwnSession[]> =>
  (await request('GET', `/api/accounts/${id}/sessions`, sessions)).sessions
export const endSessionsOf = (id: number): Promise<AccountView> =>
  request('DELETE', `/api/accounts/${id}/sessions`, accountView)

export const changePreferences = (change: PreferencesChange): Promise<Preferences> =>
  request('PATCH', `${own}/preferences`, preferences, change)
export const changePassphrase = (change: PassphraseChange): Promise<unknown> =>
  request('PUT', `${own}/passphrase`, nothing, change)
export const readOwnSessions = async (): Promise<OwnSession[]> =>
  (await request('GET', `${own}/sessions`, sessions)).sessions
export const endOwnSession = (id: string): Promise<unknown> => request('DELETE', `${own}/sessions/${id}`, nothing)
export const endOtherSessions = (): Promise<unknown> => request('DELETE', `${own}/sessions`, nothing)

export const readSecondFactor = (): Promise<SecondFactorView> => request('GET', factor, secondFactorView)
export const offerSecondFactor = (password: string): Promise<SecondFactorOffer> =>
  request('POST', factor, secondFactorOffer, { password })
export const confirmSecondFactor = async (code: string): Promise<string[]> =>
  (await request('PUT', factor, recoveryCodes, { code })).codes
export const removeSecondFactor = (code: string): Promise<unknown> => request('DELETE', factor, nothing, { code })
export const renewRecoveryCodes = async (code: string): Promise<string[]> =>
  (await request('POST', `${factor}/recovery-codes`, recoveryCodes, { code })).codes

export const askForPassphraseLink = (email: string): Promise<unknown> =>
  request('POST', '/api/passphrase-links', nothing, { email })
export const readPassphraseLink = (token: string): Promise<PassphraseLinkView> =>
  request('GET', `/api/passphrase-links/${encodeURIComponent(token)}`, passphraseLinkView)
export const choosePassphrase = (token: string, password: string): Promise<unknown> =>
  request('POST', `/api/passphrase-links/${encodeURIComponent(token)}`, nothing, { password })
