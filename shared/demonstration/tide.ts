/**
 * The invented coast's tide: five harmonic constituents with their astronomical periods (Doodson 1921) and invented
 * amplitudes and phases, about mean level, which is the stations' datum.
 */
const constituents = [
  { name: 'M2', periodHours: 12.4206012, amplitude: 0.86, phase: 1.1 },
  { name: 'S2', periodHours: 12, amplitude: 0.29, phase: 2.4 },
  { name: 'N2', periodHours: 12.65834751, amplitude: 0.17, phase: 0.3 },
  { name: 'K1', periodHours: 23.93447213, amplitude: 0.08, phase: 4.0 },
  { name: 'O1', periodHours: 25.81933871, amplitude: 0.06, phase: 5.2 },
]

/** Level above datum in m at a time in milliseconds since 1970 UTC. */
export function tideLevel(time: number): number {
  const hours = time / 3_600_000
  let level = 0
  for (const { periodHours, amplitude, phase } of constituents) {
    level += amplitude * Math.cos((2 * Math.PI * hours) / periodHours - phase)
  }
  return level
}
