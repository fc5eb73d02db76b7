/**
 * A gale in faster time: the simulator begins in the past and streams faster than time until now. The sea that it makes
 * raises one alert, which goes the whole way: e-mails, receipt, acknowledgement.
 */
import { z } from 'zod'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { acknowledgementAnswer, alertDetail, alertList } from '../../shared/schemas/alert.ts'
import { listView } from '../../shared/schemas/distributionList.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import { receiptView } from '../../shared/schemas/message.ts'
import { stationView } from '../../shared/schemas/station.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import { startProgram } from '../support/program.ts'
import { until } from '../support/until.ts'
import { onWatch } from './mailKills.ts'

type Check = FaultReport['checks'][number]

const check = (name: string, passed: boolean, detail: string): Check => ({ name, passed, detail })
const patienceMs = 420_000
const minuteMs = 60_000
/** The gale grows fastest an hour and a half after its anchor. */
const hoursIntoTheGale = 2.2
const streamedMinutes = 100

const truth = z.object({ significantWaveHeight: z.number() })

export async function galeInFasterTime(seed: number, say: (line: string) => void): Promise<Check[]> {
  const server = await startTestMailServer()
  const program = await startProgram({ variables: { SMTP_URL: server.url } })
  try {
    const ask = await onWatch(program)
    const stations = await ask('GET', '/stations', z.array(stationView))
    const { lists } = await ask('GET', '/lists', z.object({ lists: z.array(listView) }))
    const duty = lists.find(({ name }) => name === 'Harbour duty')
    const now = Math.floor(Date.now() / minuteMs) * minuteMs
    const simulator = await program.simulator([
      ...['--scenario', 'veering-gale', '--seed', String(seed), '--stations', 'FW'],
      ...['--anchor', new Date(now - hoursIntoTheGale * 60 * minuteMs).toISOString()],
      ...['--from', new Date(now - streamedMinutes * minuteMs).toISOString(), '--rate', '45'],
    ])
    await simulator.start()
    say(`${streamedMinutes} min of a veering gale are streamed at 45 times time`)
    const heightAt = async (minutesAgo: number): Promise<number> => {
      const at = new Date(now - minutesAgo * minuteMs).toISOString()
      const answer = await fetch(`${simulator.truthUrl}/truth?station=FW&at=${at}&seconds=1200`)
      return truth.parse(await answer.json()).significantWaveHeight
    }
    await until('the simulator says what it makes', () => heightAt(0).then(Boolean, () => false), patienceMs)
    const [before, last] = [await heightAt(70), await heightAt(0)]
    const raise = Math.round(50 * (before + last)) / 100
    say(`the sea grows from ${before.toFixed(2)} to ${last.toFixed(2)} m; the limit is ${raise} m`)
    const limit = await ask('POST', '/limits', limitView, {
      ...{
        subjectKind: 'station',
        subjectId: stations.find(({ code }) => code === 'FW')?.id,
        reason: 'A gale is coming',
      },
      content: {
        ...{ title: 'Gale', priority: 'high', schedule: null, note: '', toCheck: 'The moorings.', reviewOn: null },
        condition: {
          comparisons: [
            { kind: 'above', quantity: 'significantWaveHeight', raise, clear: raise - 0.3, riseOverSeconds: null },
          ],
          ...{
            when: null,
            onDelaySeconds: 600,
            offDelaySeconds: 1800,
            clearSigmas: 1,
            worstQuality: 3,
            latches: false,
          },
        },
        recipients: { steps: [{ afterSeconds: 0, listIds: [duty?.id] }], remindEverySeconds: 480 },
        isPublished: false,
      },
    })
    const raised = async () =>
      (await ask('GET', `/alerts/past?days=1&limitId=${limit.id}`, alertList)).alerts.filter((one) => !one.isExercise)
    await until('the gale raises its alert', async () => (await raised()).length > 0, patienceMs)
    const [first] = await raised()
    const id = first?.id ?? 0
    const mails = () => server.caught.filter(({ mail }) => mail.subject?.includes('Gale, '))
    await until('its e-mails are out', async () => mails().length >= 2, patienceMs)
    const text = mails()[0]?.mail.text ?? ''
    say(`alert ${id}: ${first?.value?.toFixed(2)} m, ${mails().length} e-mails`)
    const token = /\/receipt\/([\w.-]+)/.exec(text)?.[1] ?? ''
    const receipt = await ask('POST', `/receipts/${token}`, receiptView, {})
    const answer = await ask('POST', `/alerts/${id}/acknowledge`, acknowledgementAnswer, { note: 'Port control told' })
    const detail = await ask('GET', `/alerts/${id}`, alertDetail)
    const kinds = detail.timeline.map(({ kind }) => kind)
    const waited = Date.parse(detail.raisedAt) - Date.parse(detail.crossedAt)
    return [
      check('it raised one alert', (await raised()).length === 1, `${(await raised()).length}`),
      check('above the limit', (first?.value ?? 0) > raise - 0.3, `${first?.value}`),
      check('after its on-delay', waited >= 600_000, `${waited / 1000} s after crossing`),
      check('each person has one e-mail', new Set(mails().map(({ to }) => to)).size === 2, `${mails().length} e-mails`),
      check('in words with both senses', /from \d{3}° T, toward \d{3}° T/.test(text), text.slice(0, 300)),
      check('a receipt is recorded and acknowledges nothing', receipt.confirmedAt !== null && receipt.alert.acknowledgedAt === null, receipt.alert.state), // prettier-ignore
      check('an operator acknowledges', answer.isFirst && detail.acknowledgedBy !== null, detail.state),
      check(
        'the timeline tells all of it',
        ['crossed', 'raised', 'message', 'receipt', 'acknowledged'].every((kind) => kinds.some((one) => one === kind)),
        kinds.join(),
      ),
    ]
  } catch (error) {
    console.log((await program.logOf('server')).slice(-4_000))
    throw error
  } finally {
    await program.stop()
    await server.stop()
  }
}
