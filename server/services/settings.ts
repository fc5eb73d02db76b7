/** Settings of the whole installation, in groups; every change is a new version with its author and reason. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { z } from 'zod'
import { english } from '../../shared/catalogue/english.ts'
import { usualFlagSet, usualPlaceCautions } from '../../shared/places/usualWords.ts'
import { coast } from '../../shared/schemas/coast.ts'
import type { PublicSettings } from '../../shared/schemas/coast.ts'
import { placeCautions } from '../../shared/schemas/placeCautions.ts'
import { flagSet } from '../../shared/schemas/placeNotice.ts'
import { dailyEmail, watchRules } from '../../shared/schemas/watchRules.ts'
import { rota } from '../../shared/schemas/watch.ts'
import type { Parts } from '../config/parts.ts'
import { SettingVersion } from '../models/index.ts'
import { recordAudit } from './audit.ts'

function isTimeZone(timeZone: string): boolean {
  try {
    new Intl.DateTimeFormat('en-GB', { timeZone })
    return true
  } catch {
    return false
  }
}

const monthsKept = z.number().int().min(1).max(1200).nullable()

/** A line break could begin a header line of an e-mail. */
const oneLine = z
  .string()
  .trim()
  .regex(/^[^\p{Cc}"<>]*$/u, 'must be one line without quotation marks and angle brackets')

/** Every group with the shape of its content. */
const shapes = {
  port: z.strictObject({
    portName: z.string().min(1).max(80),
    timeZone: z.string().min(1).max(60).refine(isTimeZone, 'is not a zone of the IANA list, such as Atlantic/Azores'),
  }),
  watch: z.strictObject({ leadStationId: z.number().int().nullable() }),
  cautions: z.strictObject({
    figures: z.string().min(20).max(400),
    array: z.string().min(20).max(400),
    traceSpeeds: z.string().min(20).max(400),
  }),
  coast: z.strictObject({ plan: coast.nullable() }),
  mail: dailyEmail,
  alerts: watchRules.extend({
    /** Sender of CAP messages: no spaces, commas, < or &. */
    capSender: z.string().regex(/^[^\s,<&]{3,100}$/),
  }),
  people: z.strictObject({ administratorsNeedSecondFactor: z.boolean() }),
  /** Whom to call here in an emergency: stands beside cautions, in e-mails and on the receipt page; empty: nothing stands there. */
  contact: z.strictObject({ emergencyLine: oneLine.max(200) }),
  /** Name before the address from which e-mails come; empty: as the configuration has it. */
  sender: z.strictObject({ name: oneLine.max(80) }),
  placeCautions,
  beachFlags: flagSet,
  /** How long before its end the watch and its lists are told of a notice about to expire. */
  notices: z.strictObject({ warnMinutes: z.number().int().min(5).max(1440) }),
  /** Watches by the port's clock; empty: they are free. */
  rota: z.strictObject({ watches: rota }),
  bulletins: z.strictObject({
    /** A second pair of eyes before a bulletin goes out or, alone, a written reason. */
    asksSecondPerson: z.boolean(),
    /** A page without sign-in shows them to everybody. */
    isPublic: z.boolean(),
  }),
  /** Months kept besides the current one; null keeps all. */
  retention: z.strictObject({
    readingBlocks: monthsKept,
    stationHealthHours: monthsKept,
    estimates: monthsKept,
    estimateDetails: monthsKept,
  }),
}

export type SettingGroup = keyof typeof shapes
export type Settings = { [Group in SettingGroup]: z.infer<(typeof shapes)[Group]> }

/** What holds until somebody has set it. */
const initial: Settings = {
  port: { portName: 'Harbour', timeZone: 'Etc/UTC' },
  watch: { leadStationId: null },
  cautions: { ...english.cautions },
  coast: { plan: null },
  alerts: { asksSecondPerson: true, longestShelfHours: 8, capSender: 'duty@harbour.example' },
  mail: { heartbeatAt: '07:00', heartbeatListId: null },
  people: { administratorsNeedSecondFactor: false },
  contact: { emergencyLine: '' },
  sender: { name: '' },
  placeCautions: usualPlaceCautions,
  beachFlags: usualFlagSet,
  notices: { warnMinutes: 30 },
  rota: { watches: [] },
  bulletins: { asksSecondPerson: true, isPublic: false },
  retention: { readingBlocks: 25, stationHealthHours: 25, estimates: null, estimateDetails: 25 },
}

/** Shape and first content of every group, for those who list them all. */
export const settingGroups = Object.keys(shapes) as SettingGroup[]
export const initialSettings: Readonly<Settings> = initial

type Shapes = { [Group in SettingGroup]: z.ZodType<Settings[Group]> }
export const shapeOf: Shapes = shapes

/** What is in force now. */
export async function settingInForce<Group extends SettingGroup>(
  { clock }: Pick<Parts, 'clock'>,
  group: Group,
  transaction?: Transaction,
): Promise<Settings[Group]> {
  const version = await SettingVersion.findOne({
    where: { groupName: group, validFrom: { [Op.lte]: clock.now() } },
    order: [
      ['validFrom', 'DESC'],
      ['id', 'DESC'],
    ],
    ...(transaction && { transaction }),
  })
  return shapeOf[group].parse(version?.content ?? initial[group])
}

export async function changeSetting<Group extends SettingGroup>(
  parts: Pick<Parts, 'clock'>,
  group: Group,
  content: Settings[Group],
  by: { personId: number | null; reason: string },
  transaction: Transaction,
): Promise<void> {
  const before = await settingInForce(parts, group, transaction)
  const version = await SettingVersion.create(
    {
      groupName: group,
      content: z.record(z.string(), z.unknown()).parse(shapeOf[group].parse(content)),
      validFrom: parts.clock.now(),
      authorId: by.personId,
      reason: by.reason,
    },
    { transaction },
  )
  const change = { action: 'setting.change', entity: 'settingVersion', entityId: version.id }
  await recordAudit(parts, { ...change, personId: by.personId, before, after: content }, transaction)
}

/** What every signed-in person sees: the port's name, the lead station, cautions, the plan of the coast. */
export async function publicSettings(parts: Pick<Parts, 'clock'>): Promise<PublicSettings> {
  const [port, watch, cautions, { plan }] = await Promise.all([
    settingInForce(parts, 'port'),
    settingInForce(parts, 'watch'),
    settingInForce(parts, 'cautions'),
    settingInForce(parts, 'coast'),
  ])
  return { ...port, ...watch, cautions, coast: plan }
}
