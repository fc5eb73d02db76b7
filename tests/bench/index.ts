/**
 * Measures what the program does in earnest; the figures go to the screen. `npm run bench`, or `npm run bench -- --accuracy [seas
 * an array] [first seed]` for the errors of the estimator; `--large-file [megabytes]` for a file of readings in a small heap, with
 * `node --max-old-space-size=128 --import tsx tests/bench/index.ts`; `--load [stations] [minutes]` for ingest, estimates and viewers
 * together, sent by a process of their own.
 */
import { benchAccuracy } from './accuracy.ts'
import { benchAcknowledgement } from './acknowledgement.ts'
import { benchAlertMail } from './alertMail.ts'
import { benchAlerts } from './alerts.ts'
import type { Figure } from './benchParts.ts'
import { benchEstimateCost } from './estimateCost.ts'
import { benchLargeFile } from './largeFile.ts'
import { benchLoad } from './load.ts'
import { benchStorage } from './storage.ts'

const words = process.argv.slice(2)

function tell(figures: Figure[]): void {
  for (const { what, value, unit } of figures) {
    process.stdout.write(`${what.padEnd(44)} ${Number(value.toPrecision(4)).toString().padStart(10)} ${unit}\n`)
  }
}

if (words[0] === '--accuracy') {
  benchAccuracy(Number(words[1] ?? 200), Number(words[2] ?? 300_001), (line) => process.stdout.write(`${line}\n`))
} else if (words[0] === '--estimate') {
  benchEstimateCost(Number(words[1] ?? 10), (line) => process.stdout.write(`${line}\n`))
} else if (words[0] === '--large-file') {
  tell(await benchLargeFile(Number(words[1] ?? 200)))
} else if (words[0] === '--load') {
  await benchLoad(Number(words[1] ?? 200), Number(words[2] ?? 10), (line) => process.stdout.write(`${line}\n`))
} else {
  tell([
    ...(await benchStorage()),
    ...(await benchAcknowledgement()),
    ...(await benchAlerts()),
    ...(await benchAlertMail()),
  ])
}
