import { z } from 'zod'
import type { Parts } from '../config/parts.ts'
import { capFeed, capXml } from '../presenters/cap.ts'
import { officeOf } from '../presenters/office.ts'
import { readCapMessages } from '../services/alerts.ts'
import { notFound } from '../services/problems.ts'
import { settingInForce } from '../services/settings.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const action = 'cap.read'

export function capRoutes(parts: Parts): Route[] {
  const messages = async () => {
    const { capSender } = await settingInForce(parts, 'alerts')
    return readCapMessages(parts, await officeOf(parts), capSender)
  }
  return [
    route({
      method: 'get',
      path: '/api/cap',
      action,
      summary: 'Atom list of the CAP 1.2 messages of published alerts, of the last seven days, newest first',
      answer: z.string(),
      media: 'application/atom+xml',
      async handle() {
        const { portName } = await officeOf(parts)
        const { publicUrl } = parts.environment
        return capFeed(await messages(), { portName, publicUrl, now: parts.clock.now().toISOString() })
      },
    }),
    route({
      method: 'get',
      path: '/api/cap/:identifier',
      action,
      summary: 'One CAP 1.2 message',
      params: z.object({ identifier: z.string().regex(/^[A-Za-z0-9-]{1,80}$/) }),
      answer: z.string(),
      media: 'application/cap+xml',
      async handle({ params: { identifier } }) {
        const message = (await messages()).find((one) => one.identifier === identifier)
        if (!message) throw notFound('CAP message', identifier)
        return capXml(message)
      },
    }),
  ]
}
