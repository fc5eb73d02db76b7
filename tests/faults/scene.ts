/** The scene of the fault tests: a running program, one station that writes down its promises, two simulated ones. */
import type { Sequelize } from 'sequelize'
import { createDatabase } from '../../server/config/database.ts'
import { execute, select } from '../../server/models/sql.ts'
import { demonstrationStations } from '../../shared/demonstration/stations.ts'
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { startProgram, untilReady } from '../support/program.ts'
import type { Killable, Program } from '../support/program.ts'
import { until } from '../support/until.ts'
import { check, checkHistory, checkUnbroken, checkWindows } from './historyChecker.ts'
import { startRecordingStation } from './recordingStation.ts'
import type { RecordingStation } from './recordingStation.ts'

/** Short windows, so that many of them come due within the test; the code that counts them is the same. */
const windowSeconds = 300
const backfillMinutes = 12
const settlePatience = 60_000

export type Victim = 'server' | 'database' | 'simulator'

export interface Scene {
  program: Program
  victims: Record<Victim, Pick<Killable, 'kill' | 'start'>>
  recorder: RecordingStation
  /** Waits until everything sent is acknowledged and every station is at the present, then checks all promises. */
  checkAll(): Promise<FaultReport['checks']>
  stop(): Promise<void>
}

const stationNamed = (code: string): DemonstrationStation => {
  const station = demonstrationStations.find((one) => one.code === code)
  if (!station) throw new Error(`There is no station ${code}`)
  return station
}

const shortenWindows = async (databaseUrl: string) => {
  const sequelize = createDatabase({ url: databaseUrl, poolSize: 1 })
  await execute(
    sequelize,
    `UPDATE stationSettings SET content = JSON_SET(content, '$.windowSeconds', ${windowSeconds})`,
  )
  await sequelize.close()
}

/** End of the newest stored reading of a station, ms since 1970 UTC; 0 when there is none. */
async function newestReading(sequelize: Sequelize, code: string): Promise<number> {
  const rows = await select<{ newest: number | null }>(
    sequelize,
    `SELECT MAX(UNIX_TIMESTAMP(f.startsAt) + f.sampleCount / f.sampleRate) AS newest
     FROM frames f JOIN stations s ON s.id = f.stationId WHERE s.code = :code`,
    { code },
  )
  return Number(rows[0]?.newest ?? 0) * 1000
}

export async function setScene(seed: number): Promise<Scene> {
  const program = await startProgram({ prepare: shortenWindows })
  const sequelize = createDatabase({ url: program.databaseUrl, poolSize: 3 })
  const recorded = stationNamed('OL')
  const simulated = ['FW', 'PB'].map(stationNamed)
  const firstSecond = Math.floor(Date.now() / 60_000) * 60 - backfillMinutes * 60
  const from = firstSecond * 1000
  // The settings were read when the server started: from here on it knows the short windows.
  await program.server.kill()
  await program.server.start()
  await untilReady(program.url)
  const recorder = startRecordingStation({
    station: recorded,
    url: `${program.url.replace('http', 'ws')}/telemetry`,
    key: program.keys.OL ?? '',
    firstSecond,
  })
  const simulator = await program.simulator([
    ...['--scenario', 'quiet', '--seed', String(seed)],
    ...['--stations', simulated.map(({ code }) => code).join(',')],
    ...['--from', new Date(from).toISOString(), '--rate', '45'],
  ])
  await simulator.start()

  async function checkAll(): Promise<FaultReport['checks']> {
    await untilReady(program.url)
    const { history } = recorder
    await until(
      'the recorded station has caught up',
      () => history.acknowledged >= Date.now() / 1000 - firstSecond - 3,
      settlePatience,
    )
    for (const { code } of simulated) {
      const caughtUp = async () => (await newestReading(sequelize, code)) > Date.now() - 5_000
      await until(`${code} has caught up`, caughtUp, settlePatience)
    }
    const to = Math.floor((firstSecond + history.acknowledged) / 60) * 60_000
    const windows = async () =>
      (await Promise.all(demonstrationStations.map(({ code }) => checkWindows(sequelize, code, from, to)))).flat()
    const complete = async () => (await windows()).every(({ passed }) => passed)
    await until('all windows are computed', complete, settlePatience).catch(() => undefined)
    recorder.stop()
    return [
      ...(await checkHistory(sequelize, recorded, history)),
      ...(await Promise.all(simulated.map((station) => checkUnbroken(sequelize, station, from, to)))).flat(),
      ...(await windows()),
      check('the server never ended unasked', program.server.running()?.exitCode === null, 'it ended by itself'),
    ]
  }

  return {
    program,
    victims: { server: program.server, database: program.databaseServer, simulator },
    recorder,
    checkAll,
    async stop() {
      recorder.stop()
      await sequelize.close().catch(() => undefined)
      await program.stop()
    },
  }
}
