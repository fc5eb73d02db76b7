import { z } from 'zod'
import { receiptView } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { confirmReceipt, showReceipt } from '../services/receipts.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const tokenInPath = z.object({ token: z.string().min(1).max(200) })

export const receiptRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/receipts/:token',
    action: 'receipts.read',
    summary: 'What the link in an e-mail is about; changes nothing',
    params: tokenInPath,
    answer: receiptView,
    handle: ({ params }) => showReceipt(parts, params.token),
  }),
  route({
    method: 'post',
    path: '/api/receipts/:token',
    action: 'receipts.confirm',
    summary: 'Confirms receipt, once; never acknowledges the alert',
    params: tokenInPath,
    answer: receiptView,
    handle: ({ params }) => confirmReceipt(parts, params.token),
  }),
]
