import type { FeatureShape } from '../tables/demoStrengths.ts'
import { FINE_SAMPLES } from './grid.ts'
import { withFeatures } from './profiles.ts'
import { blackBody, lineTransmission, starLight, withDisc } from './starLight.ts'
import type { LightOf } from './starLight.ts'

export const SPECIAL_KINDS = [
  'emission',
  'metal-weak',
  'metallic-line',
  'carbon',
  'white dwarf',
  'hot subdwarf',
  'brown dwarf',
  'composite',
  'nebular',
  'galaxy',
] as const
export type SpecialKind = (typeof SPECIAL_KINDS)[number]

type Places = readonly (readonly [wavelength: number, strength: number])[]

const EMISSION: FeatureShape = { form: 'emission', width: 4 }
/** Swan bands of C₂, which fade to the blue, and CN; strengths in Å, of the size that classical carbon stars show. */
const SWAN: Places = [
  [4737.1, 55],
  [5165.2, 75],
  [5635.5, 55],
  [6191, 20],
]
const CYANOGEN: Places = [
  [4216, 30],
  [7945, 45],
  [8120, 35],
]
/** Forbidden and recombination lines of a nebula of middling excitation, Hβ = 100; 5007/4959 and 6583/6548 are 3. */
const NEBULAR: Places = [
  [3727.4, 120],
  [3868.76, 40],
  [4101.73, 26],
  [4340.46, 47],
  [4363.21, 5],
  [4861.32, 100],
  [4958.91, 130],
  [5006.84, 390],
  [5875.62, 13],
  [6300.3, 5],
  [6548.05, 25],
  [6562.79, 290],
  [6583.45, 75],
  [6716.44, 14],
  [6730.82, 13],
  [7135.79, 12],
]
/** Gas in a galaxy with some star formation, in Å. */
const GALAXY_GAS: Places = [
  [3727.4, 14],
  [4861.32, 4],
  [4958.91, 2],
  [5006.84, 6],
  [6548.05, 5],
  [6562.79, 22],
  [6583.45, 15],
  [6716.44, 6],
  [6730.82, 5],
]
/** Hydrogen of a white dwarf: strengths in Å; the higher lines drown in the pressure of the gas. */
const WHITE_DWARF: Places = [
  [6562.79, 24],
  [4861.33, 32],
  [4340.47, 32],
  [4101.74, 26],
  [3970.07, 17],
  [3889.05, 8],
]
/** Hydrogen and helium of a hot subdwarf: broad, few. */
const SUBDWARF_HYDROGEN: Places = [
  [6562.79, 3.6],
  [4861.33, 6.2],
  [4340.47, 6.6],
  [4101.74, 6.4],
  [3970.07, 5.6],
  [3889.05, 4.4],
  [3835.38, 3],
  [3797.9, 1.6],
]
const SUBDWARF_HELIUM: Places = [
  [4199.83, 0.7],
  [4541.59, 1.1],
  [4685.7, 1.5],
  [5411.52, 1.2],
  [4471.48, 0.5],
  [5875.62, 0.5],
]
/** Bands and resonance lines of an early L dwarf. */
const BROWN_BANDS: Places = [
  [6569, 40],
  [7053, 30],
  [8435, 30],
  [8611, 60],
  [8692, 60],
]
/** The potassium doublet's wings reach over hundreds of Å in so dense a gas. */
const BROWN_POTASSIUM: Places = [
  [7664.9, 200],
  [7698.97, 200],
]
const BROWN_LINES: Places = [
  [7800.3, 6],
  [7947.6, 6],
  [8183.26, 4],
  [8194.82, 4],
  [8521.1, 7],
]

function withAll(light: Float64Array, shape: FeatureShape, places: Places, scale = 1): Float64Array {
  return withFeatures(
    light,
    places.map(([wavelength, strength]) => ({ shape, wavelength, strength: strength * scale })),
  )
}

function product(a: Float64Array, b: Float64Array): Float64Array {
  return a.map((value, i) => value * b[i])
}

const clear = (): Float64Array => new Float64Array(FINE_SAMPLES).fill(1)

/** Metals of a star poor in them: factors on the strengths of the demo's features. */
const METALS_WEAK = {
  'Fe I and Cr I': 0.2,
  'Fe II and Ti II': 0.2,
  'Ca II H and K': 0.35,
  'Ca II infrared': 0.5,
  'Sr II': 0.2,
  'Ca I 4227': 0.2,
  'Ca I red': 0.2,
  'G band': 0.4,
  'CN 4150': 0,
  'Mg b': 0.3,
  MgH: 0.2,
  'Na D': 0.2,
}
/** Calcium of an early A star beside iron of an F star. */
const METALLIC_LINE = {
  'Ca II H and K': 0.4,
  'Fe I and Cr I': 4.5,
  'Fe II and Ti II': 2.2,
  'Sr II': 3.5,
  'Ca I 4227': 0.3,
}

/** The light of a star with some of its features scaled, all else as it was. */
function rescaled(
  type: number,
  luminosity: number,
  scale: Readonly<Record<string, number>>,
  lightOf: LightOf,
): Float64Array {
  const [plain, changed] = [lineTransmission(type, luminosity), lineTransmission(type, luminosity, scale)]
  return lightOf(type, luminosity).map((value, i) => (value * changed[i]) / plain[i])
}

function mixed(a: Float64Array, b: Float64Array, share: number): Float64Array {
  return a.map((value, i) => (1 - share) * value + share * b[i])
}

/**
 * Light of a made object that is no ordinary star, in photons per Å on the fine grid, at rest (a galaxy too: give
 * `madeSpectrum` its velocity). For tests of recognition: each shows what the kind is known by, drawn from handbook
 * descriptions, with invented strengths. It proves that the criteria fire, not that real objects are told.
 *
 * @param lightOf  the ordinary stars that some kinds are made from; `expectedLightOf` gives such as the program expects
 */
export function specialLight(kind: SpecialKind, lightOf: LightOf = starLight): Float64Array {
  if (kind === 'emission') return withDisc(lightOf(12, 5))
  if (kind === 'metal-weak') return rescaled(36, 5, METALS_WEAK, lightOf)
  if (kind === 'metallic-line') return rescaled(25, 5, METALLIC_LINE, lightOf)
  // equal light near 5500 Å: the blue shows the hot star, the red the cool giant
  if (kind === 'composite') return mixed(lightOf(17, 5), lightOf(55, 3), 0.5)
  if (kind === 'galaxy') {
    const stars = mixed(lightOf(48, 3), lightOf(28, 5), 0.2)
    return product(stars, withAll(clear(), { form: 'emission', width: 6 }, GALAXY_GAS))
  }
  if (kind === 'carbon') {
    const lines = lineTransmission(52, 3, { 'CN 4150': 1, 'G band': 1.2, MgH: 0, 'Na D': 3 })
    return product(blackBody(3300), withAll(lines, { form: 'head', reach: -90 }, [...SWAN, ...CYANOGEN]))
  }
  if (kind === 'white dwarf') {
    return product(blackBody(15000), withAll(clear(), { form: 'winged', width: 42 }, WHITE_DWARF))
  }
  if (kind === 'hot subdwarf') {
    const hydrogen = withAll(clear(), { form: 'winged', width: 15 }, SUBDWARF_HYDROGEN)
    return product(blackBody(35000), withAll(hydrogen, { form: 'line' }, SUBDWARF_HELIUM))
  }
  if (kind === 'brown dwarf') {
    const bands = withAll(clear(), { form: 'head', reach: 110 }, BROWN_BANDS)
    const lines = withAll(bands, { form: 'winged', width: 45 }, BROWN_LINES)
    return product(blackBody(1900), withAll(lines, { form: 'winged', width: 180 }, BROWN_POTASSIUM))
  }
  // a nebula: lines on a weak blue continuum
  const weak = blackBody(20000).map((value) => 0.02 * value)
  return withAll(clear(), EMISSION, NEBULAR, 0.6).map((value, i) => weak[i] + 0.05 * (value - 1))
}
