import request from 'supertest'
import { create } from 'xmlbuilder2'
import type { XMLBuilder } from 'xmlbuilder2/lib/interfaces.js'
import { describe, expect, it } from 'vitest'
import { Station } from '../../server/models/index.ts'
import { judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()

/** Elements and their order as the schema of the standard fixes them (OASIS CAP 1.2, 1 July 2010, section 3.4). */
const orders: Record<string, string[]> = {
  alert: ['identifier', 'sender', 'sent', 'status', 'msgType', 'source', 'scope', 'restriction', 'addresses', 'code', 'note', 'references', 'incidents', 'info'],
  info: ['language', 'category', 'event', 'responseType', 'urgency', 'severity', 'certainty', 'audience', 'eventCode', 'effective', 'onset', 'expires', 'senderName', 'headline', 'description', 'instruction', 'web', 'contact', 'parameter', 'resource', 'area'],
  area: ['areaDesc', 'polygon', 'circle', 'geocode', 'altitude', 'ceiling'],
  parameter: ['valueName', 'value'],
} // prettier-ignore
const required: Record<string, string[]> = {
  alert: ['identifier', 'sender', 'sent', 'status', 'msgType', 'scope'],
  info: ['category', 'event', 'urgency', 'severity', 'certainty'],
  area: ['areaDesc'],
  parameter: ['valueName', 'value'],
}
const enumerations: Record<string, string[]> = {
  status: ['Actual', 'Exercise', 'System', 'Test', 'Draft'],
  msgType: ['Alert', 'Update', 'Cancel', 'Ack', 'Error'],
  scope: ['Public', 'Restricted', 'Private'],
  category: ['Geo', 'Met', 'Safety', 'Security', 'Rescue', 'Fire', 'Health', 'Env', 'Transport', 'Infra', 'CBRNE', 'Other'],
  responseType: ['Shelter', 'Evacuate', 'Prepare', 'Execute', 'Avoid', 'Monitor', 'Assess', 'AllClear', 'None'],
  urgency: ['Immediate', 'Expected', 'Future', 'Past', 'Unknown'],
  severity: ['Extreme', 'Severe', 'Moderate', 'Minor', 'Unknown'],
  certainty: ['Observed', 'Likely', 'Possible', 'Unlikely', 'Unknown'],
} // prettier-ignore
const times = ['sent', 'effective', 'onset', 'expires']

interface Element {
  name: string
  text: string
  children: Element[]
}

function read(builder: XMLBuilder): Element {
  const children: Element[] = []
  builder.each((child) => void (child.node.nodeType === 1 && children.push(read(child))))
  return { name: builder.node.nodeName, text: (builder.node.textContent ?? '').trim(), children }
}

const elements = (xml: string): Element => read(create(xml).root())

function faultsOf(element: Element): string[] {
  const order = orders[element.name]
  const own: string[] = []
  if (order) {
    const places = element.children.map(({ name }) => order.indexOf(name))
    if (places.includes(-1)) own.push(`${element.name}: unknown child`)
    if (places.some((place, n) => n > 0 && place < (places[n - 1] ?? 0))) own.push(`${element.name}: order`)
    for (const name of required[element.name] ?? []) {
      if (!element.children.some((child) => child.name === name)) own.push(`${element.name}: no ${name}`)
    }
  }
  const allowed = enumerations[element.name]
  if (allowed && !allowed.includes(element.text)) own.push(`${element.name}: ${element.text}`)
  if (times.includes(element.name) && !/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d[-+]\d\d:\d\d$/.test(element.text)) {
    own.push(`${element.name}: ${element.text}`)
  }
  if (/^(identifier|sender)$/.test(element.name) && /[\s,<&]/.test(element.text))
    own.push(`${element.name}: ${element.text}`)
  return [...own, ...element.children.flatMap(faultsOf)]
}

const textOf = (element: Element, name: string): string =>
  element.children.find((child) => child.name === name)?.text ??
  element.children.map((child) => textOf(child, name)).find((text) => text !== '') ??
  ''

const get = async (path: string) => (await request(held.app).get(path).buffer(true).expect(200)).text

/** Of this test's station, newest first. */
async function messages(): Promise<Element[]> {
  const feed = elements(await get('/api/cap'))
  const entries = feed.children.filter(
    (one) => one.name === 'entry' && textOf(one, 'id').includes(`/${held.station.code}-`),
  )
  const found: Element[] = []
  for (const entry of entries) found.push(elements(await get(new URL(textOf(entry, 'id')).pathname)))
  return found
}

const condition = { ...plainCondition, onDelaySeconds: 0, offDelaySeconds: 0 }

describe('the CAP feed', () => {
  it('chains Alert, Cancel and a new Alert of a published limit, each after the rules of the schema', async () => {
    await held.setLimit({ isPublished: true, condition })
    await held.sea(0, 0, { height: 2.8 })
    await held.sea(1, 1, { height: 1 })
    await held.sea(2, 2, { height: 3 })
    const found = await messages()
    expect(found.flatMap(faultsOf)).toEqual([])
    expect(found.map((message) => textOf(message, 'msgType'))).toEqual(['Alert', 'Cancel', 'Alert'])
    const [, cancel, first] = found
    const name = (message: Element | undefined) => message && `${textOf(message, 'sender')},${textOf(message, 'identifier')},${textOf(message, 'sent')}` // prettier-ignore
    expect(cancel && textOf(cancel, 'references')).toBe(name(first))
    expect(first && textOf(first, 'sent')).toBe('2026-12-01T12:00:10-00:00')
    expect(first && textOf(first, 'severity')).toBe('Severe')
    expect(cancel && textOf(cancel, 'description')).toContain('does not mean that the sea is safe')
  })

  it('gives an area with latitude before longitude, the other order than GeoJSON', async () => {
    const ring = [[-21.03, 47.48], [-21.01, 47.48], [-21.01, 47.49], [-21.03, 47.48]] // prettier-ignore
    await Station.update({ areaPolygon: { type: 'Polygon', coordinates: [ring] } }, { where: { id: held.station.id } })
    await held.setLimit({ isPublished: true, condition })
    await held.sea(0, 0, { height: 2.8 })
    const [message] = await messages()
    expect(message && textOf(message, 'polygon')).toBe(
      '47.48000,-21.03000 47.48000,-21.01000 47.49000,-21.01000 47.48000,-21.03000',
    )
  })

  it('marks a drill as Exercise in status and headline', async () => {
    const limitId = await held.setLimit({ isPublished: true, condition })
    await held.desk.post('/api/drills').send({ limitId, value: 3.4, note: 'Monthly drill' }).expect(201)
    const [message] = await messages()
    expect(message && textOf(message, 'status')).toBe('Exercise')
    expect(message && textOf(message, 'headline')).toMatch(/^EXERCISE /)
  })

  it('leaves out alerts whose limit does not say that they are published', async () => {
    const limitId = await held.setLimit({ condition })
    await held.sea(0, 0, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    expect((await messages()).filter((message) => textOf(message, 'incidents') === `alert-${alert?.id}`)).toEqual([])
    await request(held.app).get('/api/cap/S1-1-1').expect(404)
  })
})
