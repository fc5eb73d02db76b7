/** Measures what the program does in earnest. Run by `npm run bench`; the figures go to the screen. */
import { benchAcknowledgement } from './acknowledgement.ts'
import { benchAlertMail } from './alertMail.ts'
import { benchStorage } from './storage.ts'

for (const { what, value, unit } of [
  ...(await benchStorage()),
  ...(await benchAcknowledgement()),
  ...(await benchAlertMail()),
]) {
  process.stdout.write(`${what.padEnd(44)} ${Number(value.toPrecision(4)).toString().padStart(10)} ${unit}\n`)
}
