/** What a browser says of itself, in two words people know: `Phone, Android`. It may lie, and nothing hangs on it. */
const systems: [RegExp, string][] = [
  [/iPhone|iPad/, 'iOS'],
  [/Android/, 'Android'],
  [/Windows/, 'Windows'],
  [/Macintosh|Mac OS X/, 'macOS'],
  [/CrOS/, 'ChromeOS'],
  [/Linux|X11/, 'Linux'],
]

export function deviceOf(userAgent: string | undefined): string | null {
  if (!userAgent) return null
  const system = systems.find(([form]) => form.test(userAgent))?.[1]
  if (!system) return null
  const isTablet = /iPad|Tablet/.test(userAgent) || (/Android/.test(userAgent) && !/Mobile/.test(userAgent))
  return `${isTablet ? 'Tablet' : /Mobile|iPhone/.test(userAgent) ? 'Phone' : 'Computer'}, ${system}`
}
