/** Keys by which stations prove themselves: `prefix.secret`, shown once, hashed at rest. */
import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'
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

/** Whose key this is; null for one that is unknown, revoked or past its date. `key` is `prefix.secret`. */
export async function holderOfKey({ clock }: Pick<Parts, 'clock'>, key: string): Promise<KeyHolder | null> {
  const [, prefix, secret] = /^([\w-]{1,16})\.([\w-]{1,100})$/.exec(key) ?? []
  if (prefix === undefined || secret === undefined) return null
  const known = await StationKey.findOne({ where: { prefix } })
  if (!known || !timingSafeEqual(known.secretHash, hashOf(secret))) return null
  const now = clock.now()
  if (known.revokedAt || (known.validUntil && known.validUntil <= now)) return null
  if (!known.lastUsedAt || now.getTime() - known.lastUsedAt.getTime() > useNotedEveryMs) {
    await known.update({ lastUsedAt: now })
  }
  return { keyId: known.id, stationId: known.stationId, validUntil: known.validUntil }
}

const presentKey = (key: StationKey): StationKeyView => ({
  id: key.id,
  prefix: key.prefix,
  createdAt: key.createdAt.toISOString(),
  validUntil: key.validUntil?.toISOString() ?? null,
  revokedAt: key.revokedAt?.toISOString() ?? null,
  lastUsedAt: key.lastUsedAt?.toISOString() ?? null,
})
