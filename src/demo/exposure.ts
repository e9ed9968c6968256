import { seededNormal, seededUniform } from '../numeric/random.ts'
import { DEMO_INSTRUMENT, DEMO_JUMP, DEMO_OFFSETS, DEMO_SETUPS } from '../tables/demoNight.ts'
import type { DemoTrouble } from '../tables/demoNight.ts'
import { quickLookFile, quickLookName, rawFile } from './exposureFiles.ts'
import type { DemoFile } from './exposureFiles.ts'
import { exposureCards } from './headers.ts'
import { arcElectrons, evenElectrons, skyElectrons, starElectrons } from './instrument.ts'
import { pointingAt } from './pointing.ts'
import { quickLook } from './quickLook.ts'
import type { QuickLookFlaws } from './quickLook.ts'
import { rawCounts, starField } from './rawFrame.ts'
import type { FrameLight } from './rawFrame.ts'
import { DEMO_MJD } from './schedule.ts'
import type { DemoExposure } from './schedule.ts'
import { blackBody, starLight, withDisc } from './starLight.ts'
import type { LightOf } from './starLight.ts'

const SECONDS_A_DAY = 86400
/** Temperature of a tungsten lamp [K]. */
const TUNGSTEN = 3000
/** Electrons per pixel row at the best efficiency in flats and sky flats, and dark current in electrons a second. */
const FLAT_LEVEL = 32000
const SKYFLAT_LEVEL = 14000
const DARK_CURRENT = 0.004

/** Everything an exposure leaves on disk: its raw frame, and for stars the quick-look spectrum. */
export function* exposureFiles(
  exposure: DemoExposure,
  given: { readonly clean: boolean; readonly seed: number; readonly lightOf: LightOf },
): Generator<DemoFile, void, undefined> {
  const { step, star, number, place } = exposure
  const trouble = given.clean ? undefined : step.trouble
  const normal = seededNormal(given.seed * 100003 + place * 2)
  const uniform = seededUniform(given.seed * 100003 + place * 2 + 1)
  const east = trouble === 'wrong star' ? DEMO_OFFSETS.wrongArcmin / 60 : 0
  const sky = star && pointingAt(star, exposure.mjdStart + step.exposure / 2 / SECONDS_A_DAY, east, uniform)
  const cards = exposureCards(exposure, sky, trouble === 'clock slip' ? DEMO_OFFSETS.clockHours / 24 : 0)
  const seeing = DEMO_INSTRUMENT.seeing * (sky ? sky.airmass ** 0.6 : 1) * (1 + 0.05 * normal())
  const setup = DEMO_SETUPS[step.setup]
  const raw = `raw/vs${String(number).padStart(4, '0')}.fits`
  if (!star || !sky || step.kind === 'acquisition') {
    yield { path: raw, bytes: rawFile(rawCounts(calibrationLight(exposure, trouble, uniform), normal), cards) }
    return
  }
  const { type, luminosity } = trouble === 'wrong star' ? { ...star, ...DEMO_OFFSETS.wrongStar } : star
  const plain = given.lightOf(type, luminosity)
  const light = trouble === 'emission' ? withDisc(plain) : plain
  const electrons = starElectrons(light, setup, {
    mag:
      star.mag +
      (trouble === 'too faint' ? DEMO_OFFSETS.cloudMagnitudes : trouble === 'saturated' ? DEMO_OFFSETS.brighterBy : 0),
    velocity: star.velocity - sky.barycentric,
    airmass: sky.airmass,
    exposure: step.exposure,
  })
  const background = skyElectrons(setup, step.exposure)
  const even = background.map((value) => value / DEMO_INSTRUMENT.rowsExtracted)
  yield { path: raw, bytes: rawFile(rawCounts({ star: electrons, seeing, even }, normal), cards) }
  const look = quickLook(electrons, background, setup, {
    normal,
    seeing,
    flaws: flawsOf(exposure, trouble, given.clean),
  })
  const form = step.form ?? 'table'
  const path = quickLookName(number, step.setup, form)
  const bytes = quickLookFile(look, step.setup, form, cards)
  yield {
    path,
    bytes: trouble === 'truncated' ? bytes.subarray(0, Math.floor(bytes.length * DEMO_OFFSETS.truncatedTo)) : bytes,
  }
  if (trouble === 'duplicate') yield { path: path.replace('.fits', '_copy.fits'), bytes }
}

function flawsOf(exposure: DemoExposure, trouble: DemoTrouble | undefined, clean: boolean): QuickLookFlaws {
  const hour = (exposure.mjdStart - DEMO_MJD) * 24
  if (!clean && exposure.step.setup === DEMO_JUMP.setup && hour > DEMO_JUMP.hour) return { shift: DEMO_JUMP.shift }
  if (trouble === 'cosmic ray') return { hit: DEMO_OFFSETS.hit }
  if (trouble === 'sky over-subtracted') return { oversubtract: DEMO_OFFSETS.oversubtract }
  return {}
}

/** Light of everything that is no spectrum of a star. */
function calibrationLight(exposure: DemoExposure, trouble: DemoTrouble | undefined, uniform: () => number): FrameLight {
  const { step } = exposure
  const setup = DEMO_SETUPS[step.setup]
  const dark = step.exposure * DARK_CURRENT
  if (step.kind === 'flat' && trouble !== 'lamp off')
    return { even: evenElectrons(blackBody(TUNGSTEN), setup, FLAT_LEVEL), dark }
  if (step.kind === 'skyflat') return { even: evenElectrons(starLight(42, 5), setup, SKYFLAT_LEVEL), dark }
  if (step.kind === 'arc') return { even: arcElectrons(setup, step.exposure), dark }
  if (step.kind === 'acquisition' || step.kind === 'focus') {
    const bright = { x: DEMO_INSTRUMENT.width / 2 + 3.2, y: DEMO_INSTRUMENT.traceRow, electrons: 400000 }
    const faint = Array.from({ length: 12 }, () => ({
      x: uniform() * DEMO_INSTRUMENT.width,
      y: uniform() * DEMO_INSTRUMENT.height,
      electrons: 3000 + 40000 * uniform() ** 3,
    }))
    return { image: starField([bright, ...faint], DEMO_INSTRUMENT.seeing), dark }
  }
  return { dark }
}
