/**
 * Sunrise and sunset (upper limb, refraction 34′) on a day, after the low-precision solar position of J. Meeus,
 * Astronomical Algorithms (1998), chapters 25 and 28; within about a minute between 65° S and 65° N.
 */
const radians = (degrees: number): number => (degrees * Math.PI) / 180
const degrees = (angle: number): number => (angle * 180) / Math.PI
const dayMs = 86_400_000
/** Centre of the sun below the horizon when its upper limb rises, degrees. */
const horizonDegrees = -0.833

export interface SunTimes {
  riseMs: number
  setMs: number
}

/**
 * @param noonMs any moment (ms since 1970 UTC) of the day around whose solar noon is asked
 * @param latitude degrees, north positive
 * @param longitude degrees, east positive
 * @returns null where the sun does not rise or does not set that day
 */
export function sunTimes(noonMs: number, latitude: number, longitude: number): SunTimes | null {
  // Mean solar noon of the day at this longitude that is nearest to the moment asked for.
  const shift = (longitude / 360) * dayMs
  const meanNoon = (Math.floor((noonMs + shift) / dayMs) + 0.5) * dayMs - shift
  const sun = sunAt(meanNoon)
  const transit = meanNoon - sun.equationOfTimeMinutes * 60_000
  const cosine =
    (Math.sin(radians(horizonDegrees)) - Math.sin(radians(latitude)) * Math.sin(sun.declination)) /
    (Math.cos(radians(latitude)) * Math.cos(sun.declination))
  if (!(Math.abs(cosine) <= 1)) return null
  const halfDay = (degrees(Math.acos(cosine)) / 360) * dayMs
  return { riseMs: transit - halfDay, setMs: transit + halfDay }
}

/** Declination in radians and the equation of time (true less mean solar time) in minutes. */
function sunAt(ms: number): { declination: number; equationOfTimeMinutes: number } {
  const century = (ms / dayMs + 2_440_587.5 - 2_451_545) / 36_525
  const meanLongitude = radians((280.46646 + 36_000.76983 * century) % 360)
  const anomaly = radians((357.52911 + 35_999.05029 * century) % 360)
  const centre = radians(
    (1.914602 - 0.004817 * century) * Math.sin(anomaly) +
      0.019993 * Math.sin(2 * anomaly) +
      0.000289 * Math.sin(3 * anomaly),
  )
  const node = radians(125.04 - 1934.136 * century)
  const apparent = meanLongitude + centre - radians(0.00569 + 0.00478 * Math.sin(node))
  const obliquity = radians(23.439291 - 0.0130042 * century + 0.00256 * Math.cos(node))
  const declination = Math.asin(Math.sin(obliquity) * Math.sin(apparent))
  const rightAscension = Math.atan2(Math.cos(obliquity) * Math.sin(apparent), Math.cos(apparent))
  const turn = meanLongitude - radians(0.0057183) - rightAscension
  const equation = degrees(Math.atan2(Math.sin(turn), Math.cos(turn))) * 4
  return { declination, equationOfTimeMinutes: equation }
}
