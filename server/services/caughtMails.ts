/** E-mails that the demonstration's own mail server kept as files instead of sending them. */
import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { simpleParser } from 'mailparser'
import type { ParsedMail } from 'mailparser'
import type { CaughtMail, CaughtMailList } from '../../shared/schemas/caughtMail.ts'
import type { Parts } from '../config/parts.ts'
import { notFound } from './problems.ts'

const most = 100
const extension = '.eml'
/** As the mail server names its files: the moment and eight random digits. */
const form = /^\d{4}-\d{2}-\d{2}T\d{6}\.\d{3}Z-[0-9a-f]{8}$/

const folderOf = ({ environment }: Pick<Parts, 'environment'>): string => join(environment.dataFolder, 'mail')

/** In real use nothing is caught and there is nothing here. */
function onlyInDemonstration({ environment }: Pick<Parts, 'environment'>): void {
  if (environment.installationKind !== 'demonstration') throw notFound('mail server', 'of the demonstration')
}

/** Newest first, at most a hundred. */
export async function listCaughtMails(parts: Pick<Parts, 'environment'>): Promise<CaughtMailList> {
  onlyInDemonstration(parts)
  const names = await readdir(folderOf(parts)).catch(() => [])
  const ids = names
    .filter((name) => name.endsWith(extension))
    .map((name) => name.slice(0, -extension.length))
    .filter((id) => form.test(id))
    .sort()
    .reverse()
  const mails = await Promise.all(ids.slice(0, most).map(async (id) => lineOf(id, await parse(parts, id, true))))
  return { mails, total: ids.length }
}

export async function readCaughtMail(parts: Pick<Parts, 'environment'>, id: string): Promise<CaughtMail> {
  onlyInDemonstration(parts)
  if (!form.test(id)) throw notFound('caught e-mail', id.slice(0, 80))
  const mail = await parse(parts, id, false)
  return { ...lineOf(id, mail), messageId: mail.messageId ?? null, text: mail.text ?? '', html: mail.html || null }
}

/** For the list the headers are enough; pictures in the HTML become data addresses. */
async function parse(parts: Pick<Parts, 'environment'>, id: string, headersOnly: boolean): Promise<ParsedMail> {
  const raw = await readFile(join(folderOf(parts), `${id}${extension}`)).catch(() => {
    throw notFound('caught e-mail', id)
  })
  const end = headersOnly ? raw.indexOf('\r\n\r\n') : -1
  return simpleParser(end < 0 ? raw : raw.subarray(0, end + 4))
}

function lineOf(id: string, mail: ParsedMail) {
  const lines = mail.headerLines.map(({ key, line }) => ({ key, value: line.slice(line.indexOf(':') + 1).trim() }))
  const all = (key: string) => lines.filter((line) => line.key === key).map(({ value }) => value)
  return {
    id,
    receivedAt: new Date(all('x-offing-received')[0] ?? 0).toISOString(),
    from: all('x-offing-from')[0] ?? '',
    to: all('x-offing-to'),
    subject: mail.subject ?? '',
  }
}
