import { demonstrationStations } from '../shared/demonstration/stations.ts'
import { scenarios } from './scenarios/index.ts'

const width = Math.max(...scenarios.map(({ name }) => name.length))

export const helpText = `Makes a sea and sends it as real stations would, one socket a station.

  npm run simulate -- --url ws://127.0.0.1:8080/telemetry --keys FILE [options]
  npm run simulate -- --write-past DIR [--hours 12] [options]
  npm run simulate -- --replay station.json readings.csv --as CODE --url … --keys FILE

The sea
  --scenario NAME     what the sea does (default ${scenarios[0].name}):
${scenarios.map(({ name, summary }) => `                        ${name.padEnd(width)}  ${summary}`).join('\n')}
  --seed N            the chance in it (default 1): the same seed, scenario, anchor and time give the same readings
  --anchor MOMENT     the scenario's hour zero; faults begin there (default 2026-01-01T00:00:00Z;
                      now with --write-past)
  --continue FILE     go on with the sea of a past written earlier (its manifest.json), from where it ended
  --stations CODES    some of ${demonstrationStations.map(({ code }) => code).join(',')} (default all)
  --station-file FILE the station of a file instead of these, as GET /api/stations/ID/stationFile gives it

The stream
  --url URL           telemetry address of the server
  --keys FILE         JSON {"OL": "prefix.secret", …}
  --state DIR         keeps each station's stream and sequence, so that a restart, even after a kill, resumes it
  --backfill SPAN     start so far in the past and send it as back-fill, 49 times as fast as time, before going live
  --from MOMENT       start in the past and stream --rate times as fast as time until now, never beyond
  --rate N            with --from (default 60; a server may refuse more than 50)
  --truth-port PORT   serve the truth as JSON on 127.0.0.1: /truth?station=OL&at=MOMENT&seconds=1200

The past
  --write-past DIR    write readings and past sea states for the demonstration, with manifest.json, and end
  --hours N           of readings before now (default 12); with --backfill they end that much earlier

A recorded file
  --replay STATION READINGS --as CODE
                      send a recording as station CODE. The station must be set up with the recording's sensors
                      (same names, kinds and positions) and its sample rate; nothing is resampled. The recording is
                      re-timed to end now and sent as back-fill; with --live it begins now and takes its time.

Moments: now, -6h, 2026-12-01T06:00:00Z. Spans: 90s, 25m, 6h, 2d.
`
