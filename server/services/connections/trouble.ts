/** What is wrong with a connection, in plain words with what to do. */
import type { ConnectionAttempt } from '../../../shared/schemas/stationSetUpLink.ts'
import { telemetryClose } from '../../../shared/wire/telemetry.ts'

const ofKey: Partial<Record<ConnectionAttempt['keyState'], string>> = {
  missing: 'It sent no key. Send the header "Authorization: Bearer KEY" when the connection is opened.',
  unknown: 'Its key is not known here. Copy the whole key as it was shown once, or issue a new one.',
  revoked: 'Its key was revoked. Issue a new one and put it into the station.',
  expired: 'Its key has passed its date. Issue a new one and put it into the station.',
}

const ofClose: Record<number, string> = {
  [telemetryClose.tooLarge]: 'It sent a message of more than 64 KiB. Send shorter frames.',
  [telemetryClose.malformed]: 'It sent messages that cannot be read. See the refusals for what is wrong with them.',
  [telemetryClose.keyRefused]: 'Its key is not that of the station it named, or was revoked.',
  [telemetryClose.retired]: 'The station is retired. Restore it first.',
  [telemetryClose.noPong]: 'It did not answer a ping. The network broke, or the station hung.',
  [telemetryClose.helloDoesNotFit]: 'It described another array than the one in force. Change the station or the deployment so that both say the same.', // prettier-ignore
  [telemetryClose.replaced]: 'A newer connection of the same station took over. If it happens again and again, two programs use one key.', // prettier-ignore
  [telemetryClose.tooFast]: 'It sent faster than 50 times real time. Send kept frames more slowly.',
  [telemetryClose.tryAgainLater]: 'The database did not take its readings. Nothing is lost; it tries again.',
}

const ofRefusal: Record<string, string> = {
  malformed: 'Frames cannot be read',
  conflict: 'Frames differ from what is stored under their number or time',
  future: "Frames lie in the future: the station's clock is ahead",
  tooOld: 'Frames are older than 24 h: import them as a file',
  unknownSensor: 'Frames name a sensor that is not deployed',
  wrongInterval: 'Frames come at another rate than the one that is set up',
}

/** Null: nothing is wrong. What the newest event says goes first. */
export function troubleOf(attempt: ConnectionAttempt): string | null {
  const { keyState, closeCode, refusals, hello } = attempt
  if (keyState !== 'valid') return ofKey[keyState] ?? null
  const closed = closeCode === null ? undefined : ofClose[closeCode]
  if (closed !== undefined) return closed
  const worst = refusals.reduce<(typeof refusals)[number] | null>((most, one) => (!most || one.count > most.count ? one : most), null) // prettier-ignore
  if (worst) return `${ofRefusal[worst.code] ?? worst.code} (${worst.count} so far; ${worst.detail}).`
  const offset = hello?.clockOffsetSeconds ?? 0
  if (Math.abs(offset) > 1) {
    const way = offset > 0 ? 'behind' : 'ahead of'
    return `Its clock is ${Math.abs(offset).toFixed(1)} s ${way} the server's: over 1 s its figures are suspect, over 10 s no vector is given.` // prettier-ignore
  }
  return null
}
