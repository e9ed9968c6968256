import { featureName } from '../features/featureName.ts'
import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { HeaderFacts } from '../spectrum/types.ts'
import { figure, withError } from './figures.ts'
import type { Limits, SpectrumInput } from './samples.ts'

/** Å of emission below which a line is not called one. */
const FAINTEST_EMISSION = 0.5
const BALMER = /^H ?-?(?:alpha|beta|gamma|delta|α|β|γ|δ|a|b)$/i

/** Says what the lines and the type tell of the star that an observer should look at, and what the header lacks. */
export function checkStar({ measurements, type, spectrum }: SpectrumInput, limit: Limits): readonly Finding[] {
  const found: Finding[] = []
  const emission = measurements.filter(
    ({ feature, unit, ew, ewErr }) =>
      unit === 'Å' &&
      BALMER.test(feature) &&
      ew !== undefined &&
      ewErr !== undefined &&
      ew < -FAINTEST_EMISSION &&
      ew < -limit('emissionSigma') * ewErr,
  )
  // in cool stars the bands beside a Balmer line are cut by other lines, and the measure turns negative
  const isCool = type.typeNumber !== undefined && type.typeNumber > 35
  const inEmission = emission.filter(({ feature }) => !isCool || /alpha|α/i.test(feature))
  if (inEmission.length) {
    const strongest = inEmission.reduce((most, line) => ((line.ew ?? 0) < (most.ew ?? 0) ? line : most))
    const text = `${featureName(strongest.feature)} stands in emission, ${withError(-(strongest.ew ?? 0), strongest.ewErr ?? 0)} Å above the continuum`
    found.push(finding(QUALITY_RULES, 'emission-lines', text, { value: strongest.ew, limit: -FAINTEST_EMISSION }))
  }
  if (type.state === 'none')
    found.push(
      finding(QUALITY_RULES, 'no-type', `No type could be told: ${type.reason ?? 'no feature could be measured'}`),
    )
  if (type.state === 'outside')
    found.push(
      finding(
        QUALITY_RULES,
        'no-ordinary-star',
        `No ordinary O to M star: ${[type.peculiar.map(({ word }) => word).join(', '), type.reason].filter(Boolean).join(', ') || 'no type fits'}`,
      ),
    )
  if (type.fitProbability !== undefined && type.fitProbability < limit('fitProbability') && type.state !== 'none') {
    const text = `The best type leaves a root mean square pull of ${figure(type.fitPull ?? NaN)}: only ${figure(type.fitProbability, 2)} of ordinary stars fit worse`
    found.push(
      finding(QUALITY_RULES, 'type-fits-badly', text, { value: type.fitProbability, limit: limit('fitProbability') }),
    )
  }
  const missing = missingFacts(spectrum.facts)
  if (missing.length)
    found.push(finding(QUALITY_RULES, 'header-facts-missing', `The header does not give ${missing.join(', ')}`))
  return found
}

/** Facts the night's checks need, in words. */
function missingFacts(facts: HeaderFacts): readonly string[] {
  const wanted: readonly (readonly [string, unknown])[] = [
    ['the object', facts.object],
    ['its position', facts.ra === undefined ? undefined : facts.dec],
    ['the time', facts.mjdMid ?? facts.mjdStart],
    ['the exposure', facts.exposure],
    ['the airmass', facts.airmass],
    ['the place', facts.site],
  ]
  return wanted.filter(([, value]) => value === undefined).map(([name]) => name)
}
