/** What a station does when the server ends the connection: try again after a while, or stop with a sentence. */
import { telemetryClose } from '../../shared/wire/telemetry.ts'

export type AfterClose =
  { again: true; leastSeconds: number; why: string; slower?: boolean } | { again: false; why: string }

export function afterClose(closeCode: number, reason: string, code: string, keysFile: string): AfterClose {
  const said = reason ? `: ${reason}` : ''
  switch (closeCode) {
    case telemetryClose.keyRefused:
      return {
        again: false,
        why: `${code}: the server does not know this station's key or it was revoked (4401)${said}. Issue a new key for ${code} and put it into ${keysFile}`,
      }
    case telemetryClose.retired:
      return { again: false, why: `${code}: the station is retired on the server (4403)${said}` }
    case telemetryClose.helloDoesNotFit:
      return {
        again: false,
        why: `${code}: the array does not fit the deployment in force on the server (4409)${said}`,
      }
    case telemetryClose.replaced:
      return { again: false, why: `${code}: another connection with this station's key has taken over (4410)${said}` }
    case telemetryClose.tooFast:
      return { again: true, leastSeconds: 5, slower: true, why: `the server found the stream too fast (4429)${said}` }
    case telemetryClose.malformed:
      return { again: true, leastSeconds: 15, why: `the server could not read three frames in a row (4400)${said}` }
    case telemetryClose.serverRestarts:
      return { again: true, leastSeconds: 1, why: 'the server restarts' }
    default:
      return { again: true, leastSeconds: 1, why: `the link was lost (${closeCode})${said}` }
  }
}
