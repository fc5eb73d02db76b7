/** `65 h 00 min`; days only above ten of them. Seconds in. */
export function longWords(seconds: number): string {
  const minutes = Math.round(seconds / 60)
  const hours = Math.floor(minutes / 60)
  if (hours >= 240) return `${Math.floor(hours / 24)} d ${hours % 24} h`
  return hours === 0 ? `${minutes} min` : `${hours} h ${String(minutes % 60).padStart(2, '0')} min`
}
