/** What a run of a station can be ordered with. */
import type { RunChoices } from '../../../shared/schemas/run.ts'
import { stationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import type { Parts } from '../../config/parts.ts'
import { Deployment, Station, StationSettings } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { notFound } from '../problems.ts'

const newestFirst: [string, string][] = [
  ['validFrom', 'DESC'],
  ['id', 'DESC'],
]

export async function readRunChoices({ sequelize }: Parts, stationId: number): Promise<RunChoices> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const [settings, deployments, [span]] = await Promise.all([
    StationSettings.findAll({ where: { stationId }, order: newestFirst }),
    Deployment.findAll({ where: { stationId }, order: newestFirst }),
    select<{ first: Date | null; last: Date | null }>(
      sequelize,
      'SELECT MIN(startsAt) AS first, MAX(startsAt) AS last FROM readingBlocks WHERE stationId = :stationId',
      { stationId },
    ),
  ])
  const minuteMs = 60_000
  return {
    settings: settings.map(({ id, validFrom, reason, content }) => ({
      id,
      validFrom: validFrom.toISOString(),
      reason,
      windowSeconds: stationSettingsContent.parse(content).windowSeconds,
    })),
    deployments: deployments.map(({ id, validFrom, recordedAt, reason, replacesId }) => ({
      id,
      validFrom: validFrom.toISOString(),
      recordedAt: recordedAt.toISOString(),
      reason,
      replacesId,
    })),
    firstWindow: span?.first ? new Date(span.first.getTime() + minuteMs).toISOString() : null,
    lastWindow: span?.last ? new Date(span.last.getTime() + minuteMs).toISOString() : null,
  }
}
