/** What runs beside the routes, one line a part: started in this order, ended in the opposite one. */
import type { Server } from 'node:http'
import type { Parts, RunningPart } from './config/parts.ts'
import { startCompactReadings } from './jobs/compactReadings.ts'
import { startComputeEstimates } from './jobs/computeEstimates.ts'
import { startDeliverMail } from './jobs/deliverMail.ts'
import { startDemonstrationPast } from './jobs/demonstrationPast.ts'
import { startEscalate } from './jobs/escalate.ts'
import { startForgetSessions } from './jobs/forgetSessions.ts'
import { startJudgeLimits } from './jobs/judgeLimits.ts'
import { startKeepNotices } from './jobs/keepNotices.ts'
import { startKeepSeriesDays } from './jobs/keepSeriesDays.ts'
import { startRecompute } from './jobs/recompute.ts'
import { startNoteDatabaseSize } from './jobs/noteDatabaseSize.ts'
import { startNoteOverdueBulletins } from './jobs/noteOverdueBulletins.ts'
import { startRetention } from './jobs/retention.ts'
import { startTakeInFiles } from './jobs/takeInFiles.ts'
import { startSealAudits } from './jobs/sealAudits.ts'
import { startLive } from './sockets/live.ts'
import { startTelemetry } from './sockets/telemetry.ts'
import { createUpgradeDispatcher } from './sockets/upgrade.ts'

export type StoppableParts = RunningPart

export async function startRunningParts(parts: Parts, server: Server): Promise<StoppableParts> {
  const started: RunningPart[] = []
  const stop = async (): Promise<void> => {
    for (const part of started.splice(0).reverse()) {
      await part.stop().catch((error: unknown) => parts.logger.error({ error }, 'a part did not end well'))
    }
  }
  const upgrades = createUpgradeDispatcher(server)
  try {
    started.push(await startRetention(parts))
    started.push(await startSealAudits(parts))
    started.push(await startForgetSessions(parts))
    started.push(await startNoteDatabaseSize(parts))
    started.push(await startDeliverMail(parts))
    started.push(startEscalate(parts))
    started.push(startNoteOverdueBulletins(parts))
    // First, for it knows how far each station's readings reach.
    const telemetry = await startTelemetry({ ...parts, upgrades })
    started.push(telemetry)
    started.push(await startLive(parts, { upgrades }))
    started.push(startJudgeLimits(parts))
    started.push(await startComputeEstimates(parts))
    started.push(startRecompute(parts))
    started.push(startKeepSeriesDays(parts))
    started.push(startKeepNotices(parts))
    started.push(await startCompactReadings(parts, telemetry.store))
    started.push(startDemonstrationPast(parts))
    started.push(startTakeInFiles(parts))
  } catch (error) {
    await stop()
    throw error
  }
  return { stop }
}
