/**
 * `npm run audit:verify`: walks the whole chain of the audit and holds it against the anchors kept outside the database.
 * It may run beside the server. Exit codes: 0 the chain is whole; 1 it is not; 2 nothing could be looked at.
 *
 * Found: any altered or missing sealed row; rows cut off the end, as far back as an anchor reaches (one an hour, and one
 * each hundred rows); a chain made anew; forged or missing anchors. Not found: rows that were taken away within ten
 * seconds of being written, before their seal; rows cut off since the newest anchor; and anything at all for somebody who
 * rewrites the database, the anchors' file and the installation's secret together: then only the number that the daily
 * e-mail named is left to compare with.
 */
import { verifyAudit } from '../services/audit/verify.ts'
import { commandParts, runCommand, say } from './surroundings.ts'

await runCommand(async () => {
  const parts = commandParts()
  try {
    const { isWhole, faults, ...found } = await verifyAudit(parts, null)
    say(
      `Sealed rows: ${found.sealedRows}, newest seal ${found.newestSeal}: ${found.newestHash.slice(0, 16) || 'none'}.`,
    )
    say(`Rows waiting for a seal: ${found.waitingRows}. Anchors outside the database: ${found.anchors}.`)
    for (const { says } of faults) say(says)
    say(isWhole ? 'The chain is whole.' : 'The chain is not whole.')
    return isWhole ? 0 : 1
  } finally {
    await parts.close()
  }
})
