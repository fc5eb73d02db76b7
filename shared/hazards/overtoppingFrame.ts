/** What stands beside an overtopping figure: formula, source, inputs, ranges of the tests behind it. */
import type { Breakwater, UncertainSeaAtToe } from './breakwater.ts'
import { check, input } from './figure.ts'
import type { FigureFrame, FigureMethod, RangeCheck } from './figure.ts'
import { slopeSimilarity, wallRegime } from './overtoppingFormulas.ts'

const formulas: Record<Breakwater['kind'], Pick<FigureMethod, 'name' | 'formula'>> = {
  smooth: {
    name: 'mean value, smooth slope',
    formula: 'q/√(gH³) = min(0.023/√tan α · γ ξ exp[−(2.7 Rc/(ξ H γ))^1.3], 0.09 exp[−(1.5 Rc/(H γ))^1.3])',
  },
  rubble: {
    name: 'mean value, armoured rubble slope',
    formula: 'q/√(gH³) = 0.09 exp[−(1.5 Rc/(H γf γβ))^1.3]',
  },
  vertical: {
    name: 'mean value, vertical wall',
    formula:
      'q/√(gH³): 0.047 exp[−(2.35 Rc/H)^1.3] without foreshore; 0.05 exp(−2.78 Rc/H); impulsive 0.011 √(H/(hs)) exp(−2.2 Rc/H) or 0.0014 √(H/(hs)) (Rc/H)⁻³',
  },
}
const equations: Record<Breakwater['kind'], string> = {
  smooth: '5.10, 5.11, 5.29',
  rubble: '6.5, 6.9',
  vertical: '7.1, 7.5, 7.7, 7.8',
}

export function overtoppingFrame(sea: UncertainSeaAtToe, breakwater: Breakwater): FigureFrame {
  const { kind, slope, roughness, freeCrest, toeDepth } = breakwater
  const { height, energyPeriod, obliquity } = sea
  const isSloping = kind !== 'vertical'
  return {
    unit: 'm³/s/m',
    method: {
      ...formulas[kind],
      source: `EurOtop manual 2018, eqs ${equations[kind]}; factor of the band, ranges and roughness from memory`,
      fromMemory: true,
      assumptions: [
        'a screening of one transect, not calibrated here',
        'no wind, no crown wall, no berm',
        isSloping ? 'short-crested sea' : 'obliquity left out: waves as if square on',
        'the mean says nothing of the largest single wave, which knocks people over',
      ],
    },
    inputs: [
      input('height at the toe', height.value, 'm', height.sd),
      input('energy period', energyPeriod.value, 's', energyPeriod.sd),
      input('angle to the normal of the wall', obliquity.value, 'rad', obliquity.sd),
      input('free crest', freeCrest.value, 'm', freeCrest.sd),
      input('depth at the toe', toeDepth.value, 'm', toeDepth.sd),
      ...(isSloping
        ? [
            input('slope of the face', slope.value, '1', slope.sd),
            input('roughness', roughness.value, '1', roughness.sd),
          ]
        : []),
    ],
    checks: checksOf(sea, breakwater),
  }
}

/** Ranges of the tests behind the formulas, from memory. */
function checksOf(
  { height, energyPeriod, obliquity }: UncertainSeaAtToe,
  { kind, freeCrest, slope, toeDepth }: Breakwater,
): RangeCheck[] {
  if (!(height.value > 0) || !(energyPeriod.value > 0)) return []
  const crest = check(
    'free crest over height',
    freeCrest.value / height.value,
    '1',
    kind === 'vertical' ? 0.1 : 0.5,
    3.5,
  )
  const angle = check('angle to the normal of the wall', Math.abs(obliquity.value), 'rad', 0, (80 * Math.PI) / 180)
  if (kind === 'vertical') {
    if (!(toeDepth.value > 0)) return [crest]
    const regime = wallRegime({ height: height.value, energyPeriod: energyPeriod.value, obliquity: 0 }, toeDepth.value)
    return regime === 'deep'
      ? [crest]
      : [crest, check('height over depth at the toe', height.value / toeDepth.value, '1', 0, 0.9)]
  }
  const sea = { height: height.value, energyPeriod: energyPeriod.value, obliquity: 0 }
  const steep =
    kind === 'rubble'
      ? check('slope of the face', slope.value, '1', 0.25, 0.75)
      : check('slope of the face', slope.value, '1', 0.1, 0.5)
  return slope.value > 0
    ? [
        crest,
        angle,
        steep,
        check(
          'surf similarity at the face',
          slopeSimilarity(slope.value, sea),
          '1',
          0.3,
          kind === 'rubble' ? null : 10,
        ),
      ]
    : [crest, angle]
}
