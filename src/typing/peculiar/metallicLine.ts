import type { Measurement } from '../../features/types.ts'
import type { Calibration } from '../../tables/types.ts'
import { type ExpectedFeature, expectedFeatures } from '../expected.ts'
import { typeName } from '../typeName.ts'
import type { Look, Recognised } from './look.ts'

/** Features that each of the three types is told from, of the calibration's. */
const HYDROGEN = ['HdeltaA', 'HgammaA', 'HbetaWide'] as const
const CALCIUM = ['CaK', 'CaKcore'] as const
const METALS = ['FeI4046', 'FeII4178', 'FeII4233', 'FeI4271', 'Fe4383', 'Fe4531', 'Fe4584', 'Fe5270', 'Fe5335'] as const
/** Types that are tried: B8 to G5, of dwarfs. */
const FIRST = 18
const LAST = 45
const DWARF = 5
/** Metallic-line stars have hydrogen between A0 and F5. */
const HYDROGEN_TYPES = [20, 35] as const

/**
 * Metallic-line A stars: the K line is that of an earlier type than the other metals by five subclasses or more, with
 * hydrogen between (Conti 1970).
 */
export function metallicLine(
  look: Look,
  measurements: readonly Measurement[],
  calibration: Calibration,
): Recognised | undefined {
  const balmer = look.strength('HgammaCore')
  const calcium = look.strength('CaK')
  // Only where hydrogen is as strong as in A and early F stars is there anything to compare.
  if (!balmer || balmer.ew < look.limit('compositeHydrogen') || !calcium || calcium.ew < 3 * calcium.error)
    return undefined
  const expected = expectedOf(calibration)
  const hydrogenType = typeFrom(measurements, expected, HYDROGEN)
  const calciumType = typeFrom(measurements, expected, CALCIUM)
  const metalType = typeFrom(measurements, expected, METALS)
  if (!hydrogenType || !calciumType || !metalType) return undefined
  if (hydrogenType.type < HYDROGEN_TYPES[0] || hydrogenType.type > HYDROGEN_TYPES[1]) return undefined
  const spread = metalType.type - calciumType.type
  if (spread < look.limit('metallicSpread')) return undefined
  if (calciumType.type > hydrogenType.type + 1 || metalType.type < hydrogenType.type - 1) return undefined
  if (metalType.misfit[metalType.type - FIRST] > look.limit('metallicMisfit') * metalType.used) return undefined
  const limit = look.limit('metallicSigma') ** 2
  const atCalcium = metalType.misfit[calciumType.type - FIRST] - metalType.misfit[metalType.type - FIRST]
  const atMetals = calciumType.misfit[metalType.type - FIRST] - calciumType.misfit[calciumType.type - FIRST]
  if (atCalcium < limit || atMetals < limit) return undefined
  return {
    peculiarity: look.peculiarity(
      'metallic-line',
      `the K line is that of ${typeName(calciumType.type)}, hydrogen that of ${typeName(hydrogenType.type)}, the other metals that of ${typeName(metalType.type)}: ${spread.toFixed(0)} subclasses apart (at least ${look.limit('metallicSpread')})`,
    ),
    isOutside: false,
  }
}

const expectations = new WeakMap<Calibration, readonly (readonly ExpectedFeature[])[]>()

/** What is expected at each type tried; worked out once for each calibration. */
function expectedOf(calibration: Calibration): readonly (readonly ExpectedFeature[])[] {
  const known = expectations.get(calibration)
  if (known) return known
  const names: ReadonlySet<string> = new Set([...HYDROGEN, ...CALCIUM, ...METALS])
  const fresh = Array.from({ length: LAST - FIRST + 1 }, (_, i) =>
    expectedFeatures(calibration, FIRST + i, DWARF).filter(({ feature }) => names.has(feature)),
  )
  expectations.set(calibration, fresh)
  return fresh
}

interface FoundType {
  readonly type: number
  /** shape (types tried): squared misfit of each. */
  readonly misfit: Float64Array
  readonly used: number
}

/** The type of best fit by some features alone. */
function typeFrom(
  measurements: readonly Measurement[],
  expected: readonly (readonly ExpectedFeature[])[],
  names: readonly string[],
): FoundType | undefined {
  const misfit = new Float64Array(expected.length)
  let used = 0
  for (const name of names) {
    const one = measurements.find(({ feature }) => feature === name)
    const k = expected[0].findIndex(({ feature }) => feature === name)
    if (one?.ew === undefined || one.ewErr === undefined || k < 0) continue
    used++
    for (let i = 0; i < misfit.length; i++) {
      const { value, scatter } = expected[i][k]
      misfit[i] += ((one.ew - value) / Math.hypot(one.ewErr, scatter)) ** 2
    }
  }
  if (used === 0 || used < names.length / 2) return undefined
  let best = 0
  for (let i = 1; i < misfit.length; i++) if (misfit[i] < misfit[best]) best = i
  return { type: FIRST + best, misfit, used }
}
