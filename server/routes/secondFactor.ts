import {
  codeProof,
  passphraseProof,
  recoveryCodes,
  secondFactorOffer,
  secondFactorView,
} from '../../shared/schemas/secondFactor.ts'
import type { Parts } from '../config/parts.ts'
import {
  confirmSecondFactor,
  offerSecondFactor,
  readSecondFactor,
  removeSecondFactor,
  renewRecoveryCodes,
} from '../services/secondFactor.ts'
import { settingInForce } from '../services/settings.ts'
import { counted } from './proof.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const path = '/api/profile/second-factor'
const slow = 20_000

export const secondFactorRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path,
    action: 'secondFactor.read',
    summary: 'Whether one’s own account has a second factor, and how many recovery codes are left',
    answer: secondFactorView,
    handle: ({ caller }) => readSecondFactor(parts, caller.person.id),
  }),
  route({
    method: 'post',
    path,
    action: 'secondFactor.change',
    summary: 'Offers a new secret, as text and as a QR code; not in force before a code of it is given',
    body: passphraseProof,
    answer: secondFactorOffer,
    deadlineMilliseconds: slow,
    handle: async (asked) => {
      const { portName } = await settingInForce(parts, 'port')
      const { caller, body } = asked
      return counted(parts, asked, () => offerSecondFactor(parts, caller.person.id, body.password, portName))
    },
  }),
  route({
    method: 'put',
    path,
    action: 'secondFactor.change',
    summary: 'Puts the offered secret in force by a code of it; answers the recovery codes, this once',
    body: codeProof,
    answer: recoveryCodes,
    handle: async (asked) => ({
      codes: await counted(parts, asked, () => confirmSecondFactor(parts, asked.caller.person.id, asked.body.code)),
    }),
  }),
  route({
    method: 'delete',
    path,
    action: 'secondFactor.change',
    summary: 'Takes the second factor back, with a code of it; not while the office asks for one',
    body: codeProof,
    handle: (asked) => counted(parts, asked, () => removeSecondFactor(parts, asked.caller.person.id, asked.body.code)),
  }),
  route({
    method: 'post',
    path: `${path}/recovery-codes`,
    action: 'secondFactor.change',
    summary: 'Ten new recovery codes, with a code of the second factor; older ones are worth nothing',
    body: codeProof,
    answer: recoveryCodes,
    handle: async (asked) => ({
      codes: await counted(parts, asked, () => renewRecoveryCodes(parts, asked.caller.person.id, asked.body.code)),
    }),
  }),
]
