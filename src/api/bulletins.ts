import { z } from 'zod'
import { bulletinFigure, bulletinView, publicBulletin } from '../../shared/schemas/bulletin.ts'
import type {
  BulletinDraft,
  BulletinFigure,
  bulletinIssue,
  BulletinView,
  PublicBulletin,
} from '../../shared/schemas/bulletin.ts'
import { request } from './request.ts'

export type Consented = z.infer<typeof bulletinIssue>

const bulletinList = z.object({
  drafts: z.array(bulletinView),
  bulletins: z.array(bulletinView),
  next: z.number().int().nullable(),
})
export type BulletinList = z.infer<typeof bulletinList>

const publicList = z.object({ portName: z.string(), bulletins: z.array(publicBulletin) })

export const readBulletins = (before?: number): Promise<BulletinList> =>
  request('GET', `/api/bulletins${before === undefined ? '' : `?before=${before}`}`, bulletinList)

export const readBulletin = (id: number): Promise<BulletinView> => request('GET', `/api/bulletins/${id}`, bulletinView)

/** What a bulletin could say of every station and place now. */
export const readBulletinFigures = async (): Promise<BulletinFigure[]> =>
  (await request('GET', '/api/bulletinFigures', z.object({ figures: z.array(bulletinFigure) }))).figures

export const addBulletin = (draft: BulletinDraft): Promise<BulletinView> =>
  request('POST', '/api/bulletins', bulletinView, draft)

export const changeBulletin = (
  id: number,
  version: number,
  edit: { draft: BulletinDraft; freezeAgain: boolean },
): Promise<BulletinView> => request('PUT', `/api/bulletins/${id}`, bulletinView, edit, version)

export const discardBulletin = async (id: number, version: number): Promise<void> => {
  await request('DELETE', `/api/bulletins/${id}`, z.unknown(), undefined, version)
}

export const issueBulletin = (id: number, version: number, consented: Consented): Promise<BulletinView> =>
  request('POST', `/api/bulletins/${id}/issue`, bulletinView, consented, version)

export const cancelBulletin = (id: number, version: number, reason: string): Promise<BulletinView> =>
  request('POST', `/api/bulletins/${id}/cancel`, bulletinView, { reason }, version)

export const proofBulletin = async (id: number): Promise<void> => {
  await request('POST', `/api/bulletins/${id}/proof`, z.unknown())
}

/** Without a session; refused with 404 while the office keeps its bulletins to itself. */
export const readPublicBulletins = (): Promise<{ portName: string; bulletins: PublicBulletin[] }> =>
  request('GET', '/api/publicBulletins', publicList)
