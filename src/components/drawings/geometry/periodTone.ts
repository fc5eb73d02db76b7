/** One hue in six steps for the peak period, short to long; used for nothing else. */
export const periodToneWords = ['<6', '6', '8', '10', '12', '14+ s'] as const

/** Step 1 to 6 of a period in seconds: under 6, from 6, 8, 10, 12, 14. */
export function periodStep(periodSeconds: number): number {
  if (periodSeconds < 6) return 1
  return Math.min(6, 2 + Math.floor((periodSeconds - 6) / 2))
}

export const periodTone = (periodSeconds: number): string => `var(--of-per-${periodStep(periodSeconds)})`
