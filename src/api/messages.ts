import { caughtMail, caughtMailList } from '../../shared/schemas/caughtMail.ts'
import type { CaughtMail, CaughtMailList } from '../../shared/schemas/caughtMail.ts'
import { messageDetail, messageList, receiptView } from '../../shared/schemas/message.ts'
import type { ReceiptView } from '../../shared/schemas/message.ts'
import { request } from './request.ts'

export const readMessages = (before?: number) =>
  request('GET', `/api/messages${before === undefined ? '' : `?before=${before}`}`, messageList)

/** Those that have not reached the mail server for somebody. */
export const readNotOut = () => request('GET', '/api/messages?show=notOut', messageList)

export const readMessage = (id: number) => request('GET', `/api/messages/${id}`, messageDetail)

export const sendTest = (personId: number) => request('POST', '/api/messages/test', messageDetail, { personId })

export const retryDelivery = (id: number) => request('POST', `/api/deliveries/${id}/retry`, messageDetail)

export const readCaughtMails = (): Promise<CaughtMailList> => request('GET', '/api/caughtMails', caughtMailList)

export const readCaughtMail = (id: string): Promise<CaughtMail> =>
  request('GET', `/api/caughtMails/${encodeURIComponent(id)}`, caughtMail)

/** Asking changes nothing. */
export const readReceipt = (token: string): Promise<ReceiptView> =>
  request('GET', `/api/receipts/${encodeURIComponent(token)}`, receiptView)

export const confirmReceipt = (token: string): Promise<ReceiptView> =>
  request('POST', `/api/receipts/${encodeURIComponent(token)}`, receiptView)
