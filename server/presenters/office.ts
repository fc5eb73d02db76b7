/** What alerts need of the installation's settings, for routes and jobs alike. */
import type { Parts } from '../config/parts.ts'
import type { Office } from '../services/alerts.ts'
import { settingInForce } from '../services/settings.ts'

export async function officeOf(parts: Pick<Parts, 'clock' | 'environment'>): Promise<Office> {
  const [port, cautions, alerts, placeCautions] = await Promise.all([
    settingInForce(parts, 'port'),
    settingInForce(parts, 'cautions'),
    settingInForce(parts, 'alerts'),
    settingInForce(parts, 'placeCautions'),
  ])
  return {
    ...port,
    caution: cautions.figures,
    placeCautions,
    isDemonstration: parts.environment.installationKind === 'demonstration',
    asksSecondPerson: alerts.asksSecondPerson,
    longestShelfSeconds: alerts.longestShelfHours * 3600,
  }
}
