import { z } from 'zod'
import { receiptView } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { confirmReceipt, showReceipt } from '../services/receipts.ts'
import { settingInForce } from '../services/settings.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const tokenInPath = z.object({ token: z.string().min(1).max(200) })

export function receiptRoutes(parts: Parts): Route[] {
  const contact = () => settingInForce(parts, 'contact')
  return [
    route({
      method: 'get',
      path: '/api/receipts/:token',
      action: 'receipts.read',
      summary: 'What the link in an e-mail is about; changes nothing',
      params: tokenInPath,
      answer: receiptView,
      handle: async ({ params }) => ({ ...(await showReceipt(parts, params.token)), ...(await contact()) }),
    }),
    route({
      method: 'post',
      path: '/api/receipts/:token',
      action: 'receipts.confirm',
      summary: 'Confirms receipt, once; never acknowledges the alert',
      params: tokenInPath,
      answer: receiptView,
      handle: async ({ params }) => ({ ...(await confirmReceipt(parts, params.token)), ...(await contact()) }),
    }),
  ]
}
