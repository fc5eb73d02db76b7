/** CAP messages as XML, its elements in the order that the standard's schema fixes, and their list as Atom. */
import { create } from 'xmlbuilder2'
import type { CapMessage } from '../../shared/alerts/cap.ts'

const capNamespace = 'urn:oasis:names:tc:emergency:cap:1.2'
const atomNamespace = 'http://www.w3.org/2005/Atom'

export function capXml(message: CapMessage): string {
  const { info } = message
  const document = create({ version: '1.0', encoding: 'UTF-8' })
  const alert = document.ele(capNamespace, 'alert')
  const { identifier, sender, sent, status, msgType, scope, note, references, incidents } = message
  for (const [name, text] of Object.entries({
    identifier,
    sender,
    sent,
    status,
    msgType,
    scope,
    note,
    references,
    incidents,
  })) {
    if (text !== null) alert.ele(name).txt(text)
  }
  const block = alert.ele('info')
  block.ele('language').txt(info.language)
  for (const category of info.category) block.ele('category').txt(category)
  const { event, responseType, urgency, severity, certainty, effective, onset, expires } = info
  const { senderName, headline, description, instruction, web } = info
  const inOrder = { event, responseType, urgency, severity, certainty, effective, onset, expires, senderName, headline, description, instruction, web } // prettier-ignore
  for (const [name, text] of Object.entries(inOrder)) if (text !== '') block.ele(name).txt(text)
  for (const { valueName, value } of info.parameter) {
    const parameter = block.ele('parameter')
    parameter.ele('valueName').txt(valueName)
    parameter.ele('value').txt(value)
  }
  const area = block.ele('area')
  area.ele('areaDesc').txt(info.area.areaDesc)
  if (info.area.polygon !== null) area.ele('polygon').txt(info.area.polygon)
  if (info.area.circle !== null) area.ele('circle').txt(info.area.circle)
  return document.end({ prettyPrint: true })
}

/** Atom writes UTC as +00:00 or Z (RFC 4287, 3.3). */
const atomTime = (capTime: string): string => capTime.replace(/-00:00$/, 'Z')

export interface Feed {
  portName: string
  /** Of the program, without a slash at its end. */
  publicUrl: string
  /** ISO 8601 UTC, for a feed without messages. */
  now: string
}

export function capFeed(messages: CapMessage[], { portName, publicUrl, now }: Feed): string {
  const address = `${publicUrl}/api/cap`
  const document = create({ version: '1.0', encoding: 'UTF-8' })
  const feed = document.ele(atomNamespace, 'feed')
  feed.ele('id').txt(address)
  feed.ele('title').txt(`Alerts of ${portName}`)
  feed.ele('updated').txt(messages[0] ? atomTime(messages[0].sent) : now)
  feed.ele('author').ele('name').txt(portName)
  feed.ele('link', { rel: 'self', type: 'application/atom+xml', href: address })
  for (const { identifier, sent, msgType, status, info } of messages) {
    const entry = feed.ele('entry')
    entry.ele('id').txt(`${address}/${identifier}`)
    entry.ele('title').txt(`${status === 'Actual' ? '' : `${status}: `}${msgType}: ${info.headline}`)
    entry.ele('updated').txt(atomTime(sent))
    entry.ele('link', { rel: 'alternate', type: 'application/cap+xml', href: `${address}/${identifier}` })
    entry.ele('summary').txt(info.description)
  }
  return document.end({ prettyPrint: true })
}
