/** The geometry of the ornament: bands that widen and part toward the beholder. No sea was measured for it. */
export const ornamentWidth = 860
export const ornamentHeight = 900
export const horizonY = 300
const vanishingX = 620

interface CrestBand {
  d: string
  opacity: number
}

const rounded = (value: number): number => Math.round(value * 100) / 100

/** From the horizon down, each band a little farther from the last. */
export function crestBands(): CrestBand[] {
  const bands: CrestBand[] = []
  let y = horizonY + 7
  let thickness = 1.6
  for (let index = 0; y < ornamentHeight + 20; index += 1) {
    const depth = y - horizonY
    const upper: string[] = []
    const lower: string[] = []
    for (let x = -20; x <= ornamentWidth + 20; x += 12) {
      const wobble = Math.sin(x / (90 + depth * 0.5) + index * 1.7) * depth * 0.012
      const swelling = Math.abs(Math.sin(x / (140 + depth) + index * 0.9)) * thickness * 0.55
      upper.push(`${x} ${rounded(y + wobble)}`)
      lower.push(`${x} ${rounded(y + thickness + wobble * 1.06 + swelling)}`)
    }
    bands.push({
      d: `M${upper.join('L')}L${lower.reverse().join('L')}Z`,
      opacity: rounded(0.14 + Math.min(0.3, index * 0.02)),
    })
    y += 6 + depth * 0.155
    thickness = 1.6 + (y - horizonY) * 0.045
  }
  return bands
}

/** The line of bearing, from the horizon to the lower edge. */
const slitX = vanishingX - (ornamentHeight - horizonY) * 0.62
const slitHalf = 3 + (ornamentHeight - horizonY) * 0.055
export const slit = `M${vanishingX - 3} ${horizonY}H${vanishingX + 3}L${slitX + slitHalf} ${ornamentHeight}H${slitX - slitHalf}Z`
