import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { figure, withError } from './figures.ts'
import type { Limits, Samples, SpectrumInput } from './samples.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** km/s: between air and vacuum from 4000 to 8000 Å (Ciddor 1996), with room for the error of a zero point. */
const AIR_VACUUM = { from: 78, to: 89 } as const
/** Å: where an offset in km/s is turned into samples. */
const MIDDLE = 5500

/** Says whether wavelengths, line widths and velocity are what they should be. */
export function checkScale(input: SpectrumInput, samples: Samples, limit: Limits): readonly Finding[] {
  return [...checkZeroPoint(input, samples, limit), ...checkResolution(input, limit), ...checkVelocity(input, limit)]
}

function checkZeroPoint({ zeroPoint, resolution }: SpectrumInput, { step }: Samples, limit: Limits): Finding[] {
  if (!zeroPoint || !(Math.abs(zeroPoint.offset) > limit('zeroPointSigma') * zeroPoint.error)) return []
  const { offset, error, from } = zeroPoint
  const shift = (Math.abs(offset) / SPEED_OF_LIGHT) * MIDDLE
  const said = `${withError(offset, error)} km/s, by ${shortList(from)}`
  if (Math.abs(offset) >= AIR_VACUUM.from && Math.abs(offset) <= AIR_VACUUM.to && error < 5) {
    const text = `The wavelengths are off by ${said}: the difference between air and vacuum is 82 to 85 km/s`
    return [finding(QUALITY_RULES, 'air-vacuum-mix-up', text, { value: offset, limit: AIR_VACUUM.from })]
  }
  const pixels = shift / step
  if (!(pixels > limit('zeroPointPixels'))) return []
  const widths = resolution ? shift / resolution.fwhm : pixels / 2.5
  const level = widths > limit('zeroPointWidths') ? 'doubt' : 'note'
  const text = `The wavelengths are ${offset > 0 ? 'too long' : 'too short'} by ${said}: ${figure(pixels)} samples`
  const allowed = (limit('zeroPointPixels') * step * SPEED_OF_LIGHT) / MIDDLE
  return [finding(QUALITY_RULES, 'wavelength-zero-point', text, { value: offset, limit: allowed, level })]
}

/** The first two of a list in words, and how many more there are. */
function shortList(text: string): string {
  const parts = text.split(', ')
  return parts.length <= 3 ? text : `${parts.slice(0, 2).join(', ')} and ${parts.length - 2} more`
}

function checkResolution({ resolution, spectrum }: SpectrumInput, limit: Limits): Finding[] {
  const stated =
    spectrum.facts.resolutionFwhm ??
    (spectrum.facts.resolvingPower ? MIDDLE / spectrum.facts.resolvingPower : undefined)
  if (!resolution || stated === undefined || !(stated > 0) || resolution.how === 'header') return []
  if (resolution.how.startsWith('sampling') || !(resolution.fwhm > limit('resolutionRatio') * stated)) return []
  const figures = { value: resolution.fwhm, limit: limit('resolutionRatio') * stated }
  const said = `are ${figure(resolution.fwhm)} Å wide, the header states ${figure(stated)} Å`
  return resolution.isUpperLimit
    ? [
        finding(
          QUALITY_RULES,
          'worse-resolution',
          `The narrowest lines of the star ${said}: rotation, or out of focus`,
          figures,
        ),
      ]
    : [finding(QUALITY_RULES, 'out-of-focus', `${capital(resolution.how)} ${said}`, figures)]
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

function checkVelocity({ restFrame }: SpectrumInput, limit: Limits): Finding[] {
  if (!restFrame.trusted)
    return restFrame.reason
      ? [finding(QUALITY_RULES, 'velocity-not-found', `No velocity was found: ${restFrame.reason}`)]
      : []
  const { velocity, error } = restFrame
  if (Math.abs(velocity) <= limit('velocityMaximum')) return []
  const text = `The velocity is ${error === undefined ? figure(velocity) : withError(velocity, error)} km/s, more than ${limit('velocityMaximum')} km/s`
  return [finding(QUALITY_RULES, 'velocity-unlikely', text, { value: velocity, limit: limit('velocityMaximum') })]
}
