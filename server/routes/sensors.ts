import { z } from 'zod'
import { clockOffsetOrder, sensorChange, sensorRecord } from '../../shared/schemas/stationSetUpSensors.ts'
import type { Parts } from '../config/parts.ts'
import { addClockOffset, changeSensor, listSensors } from '../services/sensors.ts'
import { versionIn } from './ifMatch.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const stationInPath = z.object({ stationId: idInPath })
const sensorInPath = z.object({ stationId: idInPath, sensorId: idInPath })

export const sensorRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/stations/:stationId/sensors',
    action: 'stationSetUp.read',
    summary: "The register of a station's instruments, with the offsets of their clocks",
    params: stationInPath,
    answer: z.array(sensorRecord),
    handle: ({ params }) => listSensors(parts, params.stationId),
  }),
  route({
    method: 'put',
    path: '/api/stations/:stationId/sensors/:sensorId',
    action: 'stationSetUp.change',
    summary: 'Change the serial or the dates that are due; needs If-Match with the version of the sensor',
    params: sensorInPath,
    body: sensorChange,
    answer: sensorRecord,
    async handle({ params, body, caller, request, response }) {
      const edit = { ...params, personId: caller.person.id }
      const record = await changeSensor(parts, edit, versionIn(request), body)
      response.set('ETag', `"${record.version}"`)
      return record
    },
  }),
  route({
    method: 'post',
    path: '/api/stations/:stationId/sensors/:sensorId/clockOffsets',
    action: 'stationSetUp.change',
    summary: "Enter an offset of a sensor's clock from a time on",
    params: sensorInPath,
    body: clockOffsetOrder,
    answer: sensorRecord,
    status: 201,
    handle: ({ params, body, caller }) => addClockOffset(parts, { ...params, personId: caller.person.id }, body),
  }),
]
