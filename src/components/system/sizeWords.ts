/** Sizes as people read them: decimal prefixes, three digits. */
export function sizeWords(bytes: number): string {
  const steps: [number, string][] = [
    [1e12, 'TB'],
    [1e9, 'GB'],
    [1e6, 'MB'],
    [1e3, 'kB'],
  ]
  const [scale, unit] = steps.find(([least]) => bytes >= least) ?? [1, 'bytes']
  const value = bytes / scale
  return `${scale === 1 || value >= 100 ? Math.round(value) : value.toFixed(1)} ${unit}`
}
