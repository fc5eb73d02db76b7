/** Keys by which stations prove themselves: `prefix.secret`, shown once, hashed at rest. */
import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { z } from 'zod'
import type { issuedStationKey, stationKeyView } from '../../shared/schemas/station.ts'
import type { Parts } from '../config/parts.ts'
import { Station, StationKey } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { notFound } from './problems.ts'
import { inTransaction } from './transaction.ts'

export type StationKeyView = z.infer<typeof stationKeyView>
export type IssuedStationKey = z.infer<typeof issuedStationKey>

const prefixBytes = 6
const secretBytes = 32
/** That a key is in use is noted no more often than this. */
const useNotedEveryMs = 60_000

/** 32 random bytes cannot be guessed from a plain hash, so connecting costs no slow one. */
const hashOf = (secret: string): Buffer => createHash('sha256').update(secret).digest()

export interface KeyOrder {
  stationId: number
  validUntil: Date | null
  /** Null: the program itself. */
  personId: number | null
}

export async function issueStationKey(
  parts: Pick<Parts, 'sequelize' | 'clock'>,
  order: KeyOrder,
  within?: Transaction,
): Promise<IssuedStationKey> {
  const issue = async (transaction: Transaction): Promise<IssuedStationKey> => {
    if (!(await Station.findByPk(order.stationId, { transaction }))) throw notFound('station', order.stationId)
    const prefix = randomBytes(prefixBytes).toString('base64url')
    const secret = randomBytes(secretBytes).toString('base64url')
    const { stationId, validUntil, personId } = order
    const key = await StationKey.create(
      {
        stationId,
        prefix,
        secretHash: hashOf(secret),
        createdAt: parts.clock.now(),
        authorId: personId,
        validUntil,
        revokedAt: null,
        lastUsedAt: null,
      },
      { transaction },
    )
    const change = { personId, action: 'stationKey.issue', entity: 'stationKey', entityId: key.id }
    await recordAudit(parts, { ...change, after: { stationId, prefix, validUntil } }, transaction)
    return { ...presentKey(key), key: `${prefix}.${secret}` }
  }
  return within ? issue(within) : inTransaction(parts.sequelize, issue)
}

/** A new key beside those that are valid now, which end after the overlap. */
export async function rotateStationKeys(
  parts: Pick<Parts, 'sequelize' | 'clock' | 'bus'>,
  { stationId, overlapMinutes, personId }: { stationId: number; overlapMinutes: number; personId: number },
): Promise<IssuedStationKey> {
  const until = new Date(parts.clock.now().getTime() + overlapMinutes * 60_000)
  const { issued, ended } = await inTransaction(parts.sequelize, async (transaction) => {
    const issued = await issueStationKey(parts, { stationId, validUntil: null, personId }, transaction)
    const others = await StationKey.findAll({
      where: {
        stationId,
        id: { [Op.ne]: issued.id },
        revokedAt: null,
        [Op.or]: [{ validUntil: null }, { validUntil: { [Op.gt]: until } }],
      },
      lock: transaction.LOCK.UPDATE,
      transaction,
    })
    for (const key of others) {
      const before = { validUntil: key.validUntil }
      await key.update({ validUntil: until }, { transaction })
      const change = { personId, action: 'stationKey.end', entity: 'stationKey', entityId: key.id, before }
      await recordAudit(parts, { ...change, after: { stationId, validUntil: until } }, transaction)
    }
    return { issued, ended: others.map(({ id }) => id) }
  })
  if (overlapMinutes === 0) for (const keyId of ended) parts.bus.publish('stationKey.revoked', { stationId, keyId })
  return issued
}

export async function listStationKeys(stationId: number): Promise<StationKeyView[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const keys = await StationKey.findAll({ where: { stationId }, order: [['id', 'ASC']] })
  return keys.map(presentKey)
}

/** Ends a key and, by the news of it, the connection that uses it. Revoking it again changes nothing. */
export async function revokeStationKey(
  parts: Pick<Parts, 'sequelize' | 'clock' | 'bus'>,
  { stationId, keyId, personId }: { stationId: number; keyId: number; personId: number | null },
): Promise<StationKeyView> {
  const view = await inTransaction(parts.sequelize, async (transaction) => {
    const key = await StationKey.findOne({
      where: { id: keyId, stationId },
      lock: transaction.LOCK.UPDATE,
      transaction,
    })
    if (!key) throw notFound('stationKey', keyId)
    if (key.revokedAt) return presentKey(key)
    await key.update({ revokedAt: parts.clock.now() }, { transaction })
    const change = { personId, action: 'stationKey.revoke', entity: 'stationKey', entityId: keyId }
    await recordAudit(parts, { ...change, after: { stationId, prefix: key.prefix } }, transaction)
    return presentKey(key)
  })
  parts.bus.publish('stationKey.revoked', { stationId, keyId })
  return view
}

export interface KeyHolder {
  keyId: number
  stationId: number
  /** Null: for ever. */
  validUntil: Date | null
}

export interface ExaminedKey {
  state: 'valid' | 'unknown' | 'revoked' | 'expired' | 'missing'
  /** As it stands in the list of keys; null: none was sent. */
  prefix: string | null
  /** Whose key begins like this; null where none does. */
  stationId: number | null
  /** Null for a key that opens nothing. */
  holder: KeyHolder | null
}

/** Whose key this is and whether it opens anything. `key` is `prefix.secret`. */
export async function examineKey({ clock }: Pick<Parts, 'clock'>, key: string): Promise<ExaminedKey> {
  const [, prefix = '', secret = ''] = /^([\w-]{1,16})\.([\w-]{1,100})$/.exec(key) ?? []
  const known = prefix === '' ? null : await StationKey.findOne({ where: { prefix } })
  const shut = (state: ExaminedKey['state']): ExaminedKey => ({
    state,
    prefix: prefix === '' ? key.slice(0, 8) || null : prefix,
    stationId: known?.stationId ?? null,
    holder: null,
  })
  if (key === '') return shut('missing')
  if (!known || !timingSafeEqual(known.secretHash, hashOf(secret))) return shut('unknown')
  const now = clock.now()
  if (known.revokedAt) return shut('revoked')
  if (known.validUntil && known.validUntil <= now) return shut('expired')
  if (!known.lastUsedAt || now.getTime() - known.lastUsedAt.getTime() > useNotedEveryMs) {
    await known.update({ lastUsedAt: now })
  }
  const { id: keyId, stationId, validUntil } = known
  return { state: 'valid', prefix, stationId, holder: { keyId, stationId, validUntil } }
}

/** Whose key this is; null for one that is unknown, revoked or past its date. */
export const holderOfKey = async (parts: Pick<Parts, 'clock'>, key: string): Promise<KeyHolder | null> =>
  (await examineKey(parts, key)).holder

const presentKey = (key: StationKey): StationKeyView => ({
  id: key.id,
  prefix: key.prefix,
  createdAt: key.createdAt.toISOString(),
  validUntil: key.validUntil?.toISOString() ?? null,
  revokedAt: key.revokedAt?.toISOString() ?? null,
  lastUsedAt: key.lastUsedAt?.toISOString() ?? null,
})
