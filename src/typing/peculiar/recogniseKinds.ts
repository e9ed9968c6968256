import type { Continuum } from '../../continuum/types.ts'
import type { Spectrum } from '../../spectrum/types.ts'
import type { Calibration, KindCriteria } from '../../tables/types.ts'
import type { Resolution, RestFrame } from '../../velocity/types.ts'
import type { TypingInput } from '../typingInput.ts'
import type { Peculiarity, PeculiarWord, TypePosterior } from '../types.ts'
import { absorptionRedshift } from './absorptionRedshift.ts'
import { brownDwarf } from './brownDwarf.ts'
import { carbonStar } from './carbonStar.ts'
import { compactStar, isHot } from './compactStars.ts'
import { compositeLight } from './composite.ts'
import { gasEmission, type GasEmission, stellarEmission } from './emissionLines.ts'
import { metallicLine } from './metallicLine.ts'
import { featurelessDwarf } from './featureless.ts'
import { mixedPopulation } from './galaxy.ts'
import { atRedshift, sumLight } from './lightSums.ts'
import { type Look, lookAt, type Recognised } from './look.ts'
import { emissionPeaks } from './peaks.ts'
import { withoutSpikes } from './withoutSpikes.ts'
import { SPEED_OF_LIGHT } from '../../numeric/speedOfLight.ts'

/** A spectrum with what was measured of it so far. */
export interface KindCase {
  readonly spectrum: Spectrum
  readonly continuum: Continuum
  readonly restFrame: RestFrame
  readonly resolution: Resolution
  readonly typing: TypingInput
}

const FEWEST_SAMPLES = 40
/** What is peculiar about a spectrum, and whether it is no ordinary O to M star at all; most telling first. */
export function recogniseKinds(star: KindCase, criteria: KindCriteria, calibration: Calibration): Recognised[] {
  const { continuum, restFrame, resolution } = star
  if (star.spectrum.wavelength.length < FEWEST_SAMPLES) return []
  const spectrum = withoutSpikes(star.spectrum, continuum)
  const velocity = restFrame.trusted ? restFrame.velocity : 0
  const isFast = Math.abs(velocity) > criteria.limits.fastestStar.value
  const sums = sumLight(spectrum, continuum, isFast ? 0 : velocity)
  const look = lookAt(sums, { fwhm: resolution.fwhm, isFluxDensity: spectrum.fluxKind === 'flux density' }, criteria)
  const gas = findGas(look, { ...star, spectrum }, criteria)
  if (gas) return [kindOfGas(gas, look, lookAt(atRedshift(sums, gas.redshift), look, criteria))]
  if (!restFrame.trusted || isFast) {
    const redshift = absorptionRedshift(look, criteria, criteria.limits.fastestStar.value / SPEED_OF_LIGHT)
    if (redshift !== undefined) return [farGalaxy(look, redshift)]
  }
  const outside = compactStar(look) ?? brownDwarf(look) ?? mixedPopulation(look) ?? featurelessDwarf(look)
  if (outside) {
    const emission = stellarEmission(look)
    return emission ? [outside, emission] : [outside]
  }
  const mixed = carbonStar(look) ?? compositeLight(look) ?? metallicLine(look, star.typing.measurements, calibration)
  return [mixed, stellarEmission(look)].filter((one) => one !== undefined)
}

/** Light of another kind or of two stars makes metals look weak; the word would say nothing of its own. */
const HIDES_METALS: ReadonlySet<PeculiarWord> = new Set(['carbon', 'composite', 'metallic-line'])

/** The type with what was recognised: an object that is no ordinary star keeps no type. */
export function withKinds(type: TypePosterior, recognised: readonly Recognised[]): TypePosterior {
  // Two stars are told from features that a type was told from; without any, it is no star's light.
  const kinds =
    type.state === 'none' ? recognised.filter(({ peculiarity: { word } }) => word !== 'composite') : recognised
  if (kinds.length === 0) return type
  const found = kinds.map(({ peculiarity }) => peculiarity)
  const outside = kinds.find(({ isOutside }) => isOutside)
  const isHidden = outside !== undefined || found.some(({ word }) => HIDES_METALS.has(word))
  const more = type.peculiar.filter(
    ({ word }) => !found.some((one) => one.word === word) && !(isHidden && word === 'metal-weak'),
  )
  const peculiar: readonly Peculiarity[] = [...found, ...more]
  if (!outside) return { ...type, peculiar }
  const { word, text } = outside.peculiarity
  return {
    state: 'outside',
    reason: `recognised as ${word}: ${text}`,
    peculiar,
    evidence: [],
    ratios: [],
    featuresUsed: type.featuresUsed,
  }
}

/** Lines that a peak of a gas may be [Å]. */
const ANCHORS = [5006.84, 6562.79, 4861.33, 3727.4] as const
/** Two frames nearer than this redshift are one; lines lie no farther than this from a peak, as a share of wavelength. */
const SAME = 0.0007
const NEAR = 0.0015

/**
 * Emission of thin gas in the star's frame, or, where the lines themselves ask for it, at another redshift: there at
 * least three lines must be peaks, and four lines or the triplet of Hβ and [O III] be seen.
 */
function findGas(look: Look, { spectrum, continuum }: KindCase, criteria: KindCriteria): GasEmission | undefined {
  const titanium = look.strength('TiO6230')
  if (titanium && titanium.ew > look.limit('gasCool')) return undefined
  const peaks = emissionPeaks(spectrum, continuum)
  const own = gasEmission(look)
  if (own || peaks.length < 3) return own
  const { sums } = look
  const tried: number[] = []
  let best: GasEmission | undefined
  for (const peak of peaks)
    for (const anchor of ANCHORS) {
      const redshift = peak / anchor - 1
      if (redshift < LEAST_REDSHIFT || redshift > look.limit('redshiftMaximum')) continue
      if (tried.some((one) => Math.abs(one - redshift) < SAME)) continue
      tried.push(redshift)
      const gas = gasEmission(lookAt(atRedshift(sums, redshift), look, criteria))
      if (!gas) continue
      const peaked = gas.lines.filter((name) =>
        peaks.some((one) => {
          const { wavelength } = criteria.windows[name]
          return Math.abs(one / (1 + redshift) - wavelength) < NEAR * wavelength
        }),
      )
      if (peaked.length < 3 || (gas.lines.length < 4 && !TRIPLET.every((name) => peaked.includes(name)))) continue
      if (!best || gas.lines.length > best.lines.length) best = gas
    }
  return best
}

const LEAST_REDSHIFT = -0.004
const TRIPLET = ['HbetaCore', 'OIII4959', 'OIII5007'] as const

/** Gas with the light of many stars is a galaxy, gas before one hot star or alone is a nebula. */
function kindOfGas(gas: GasEmission, atRest: Look, look: Look): Recognised {
  const beta = look.strength('HbetaCore')
  const oxygen = look.strength('OIII5007')
  const isBare =
    (beta !== undefined && beta.ew < look.limit('nebularHbeta')) ||
    (oxygen !== undefined && oxygen.ew < look.limit('nebularOxygen'))
  const isFar = gas.redshift * SPEED_OF_LIGHT > look.limit('fastestStar')
  if (isBare && !isFar)
    return {
      peculiarity: look.peculiarity('nebular', `${gas.text}, far stronger than any light of stars behind`),
      isOutside: true,
    }
  const helium = (['HeI4471', 'HeI4026', 'HeII4542'] as const).filter((name) => {
    const line = atRest.strength(name)
    return line !== undefined && line.ew > 0.4 && line.ew > 4 * line.error
  })
  if (!isFar && helium.length >= 2 && isHot(atRest))
    return {
      peculiarity: look.peculiarity('nebular', `${gas.text} over the helium lines of a hot star`),
      isOutside: false,
    }
  const shift = isFar ? ` at a redshift of ${gas.redshift.toFixed(4)}` : ''
  return {
    peculiarity: look.peculiarity('galaxy', `${gas.text}${shift} over the light of stars`),
    isOutside: true,
  }
}

function farGalaxy(look: Look, redshift: number): Recognised {
  return {
    peculiarity: look.peculiarity(
      'galaxy',
      `Ca II, the G band, Mg b and Na D of stars stand at a redshift of ${redshift.toFixed(3)} (stars of the Galaxy stay below ${(look.limit('fastestStar') / SPEED_OF_LIGHT).toFixed(4)})`,
    ),
    isOutside: true,
  }
}
