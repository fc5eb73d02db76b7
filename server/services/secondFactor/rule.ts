/** Whether the office asks administrators for a second factor: read without the settings' service, on every request. */
import { Op } from 'sequelize'
import { z } from 'zod'
import type { Parts } from '../../config/parts.ts'
import { SettingVersion } from '../../models/index.ts'

const content = z.object({ administratorsNeedSecondFactor: z.boolean() })

export async function administratorsNeedSecondFactor({ clock }: Pick<Parts, 'clock'>): Promise<boolean> {
  const version = await SettingVersion.findOne({
    where: { groupName: 'people', validFrom: { [Op.lte]: clock.now() } },
    order: [
      ['validFrom', 'DESC'],
      ['id', 'DESC'],
    ],
  })
  return content.safeParse(version?.content).data?.administratorsNeedSecondFactor ?? false
}
