/**
 * The invented demo night. Nothing here exists: no such observatory, telescope, instrument, star or observer.
 * Only the place, the date and the sky above it are possible ones.
 */

/** Raised whenever the night changes (its stamp holds the calibration's name besides), so that a night made by an older version is made anew. */
export const DEMO_VERSION = '3'

export const DEMO_SITE = {
  observatory: 'Cerro Velanes Observatory',
  telescope: 'Velanes 1.2 m',
  observer: 'I. Quandel',
  /** Degrees, east and north positive; metres. */
  longitude: -70.31,
  latitude: -27.46,
  height: 2180,
} as const

export const DEMO_INSTRUMENT = {
  name: 'VELSPEC',
  detector: 'V1K-3',
  /** Pixels along and across the dispersion. */
  width: 1024,
  height: 48,
  /** Electrons a count, electrons, counts. */
  gain: 1.4,
  readNoise: 4.2,
  biasLevel: 482,
  saturation: 65535,
  /** Pixels. */
  seeing: 2.6,
  traceRow: 22.4,
  traceTilt: 0.0018,
  rowsExtracted: 11,
  /** Electrons s⁻¹ Å⁻¹ from a star of magnitude 0 at 5500 Å, at the best efficiency, above the air. */
  zeroRate: 4.0e5,
  /** The same from the dark sky in the slit, summed over the rows extracted. */
  skyRate: 0.03,
} as const

export type DemoSetupName = 'blue' | 'red'

export interface DemoSetup {
  readonly grating: string
  readonly tilt: number
  readonly filter: string
  readonly slit: string
  /** Å: centre of the first pixel, Å a pixel, FWHM of the profile. */
  readonly first: number
  readonly step: number
  readonly fwhm: number
  /** Å: where the efficiency peaks, and how far away it is down to half. */
  readonly peak: number
  readonly halfWidth: number
  readonly lamp: string
  /** Lamp lines [Å, air] and electrons s⁻¹ in the line. */
  readonly lampLines: readonly (readonly [wavelength: number, rate: number])[]
}

// prettier-ignore
export const DEMO_SETUPS: Readonly<Record<DemoSetupName, DemoSetup>> = {
  blue: {
    grating: 'B600',
    tilt: 8.35,
    filter: 'open',
    slit: '1.5',
    first: 3700,
    step: 2,
    fwhm: 4.9,
    peak: 4700,
    halfWidth: 1150,
    lamp: 'HgHe',
    // Hg and He I; Source: NIST Atomic Spectra Database, in air. Rates invented.
    lampLines: [
      [3819.61, 500], [3888.65, 6500], [4026.19, 1500], [4046.56, 5200], [4120.82, 300], [4358.34, 9000], [4471.48, 3000],
      [4713.15, 900], [4921.93, 1700], [5015.68, 4200], [5047.74, 600], [5411.52, 250], [5460.75, 8800],
    ],
  },
  red: {
    grating: 'R400',
    tilt: 12.1,
    filter: 'GG455',
    slit: '1.5',
    first: 4840,
    step: 3,
    fwhm: 7.2,
    peak: 6300,
    halfWidth: 1800,
    lamp: 'NeHe',
    // Ne I and He I, from memory. Rates invented.
    lampLines: [
      [4921.93, 800], [5015.68, 2100], [5047.74, 300], [5330.78, 900], [5400.56, 1400], [5764.42, 1100], [5852.49, 5200],
      [5875.62, 6100], [5944.83, 2300], [6074.34, 2500], [6143.06, 4100], [6217.28, 1500], [6266.5, 2600],
      [6334.43, 3800], [6402.25, 8200], [6506.53, 4600], [6598.95, 2700], [6678.15, 4900], [6929.47, 3500],
      [7032.41, 6000], [7065.19, 2400], [7173.94, 1100], [7245.17, 3000], [7438.9, 1500], [7535.77, 900],
    ],
  },
}

/** A star of the night: where the list has it and what it is. */
export interface DemoStar {
  readonly name: string
  /** Degrees, ICRS, epoch 2000. */
  readonly ra: number
  readonly dec: number
  /** mas/yr. */
  readonly pmRa?: number
  readonly pmDec?: number
  readonly mag: number
  /** True type and luminosity number, and the type as the list expects it. */
  readonly type: number
  readonly luminosity: number
  readonly expected: string
  /** km/s, barycentric. */
  readonly velocity: number
  readonly wantedSnr: number
  readonly priority: number
  readonly note?: string
}

// prettier-ignore
export const DEMO_STANDARDS: readonly DemoStar[] = [
  { name: 'Std Halcyr', ra: 150.218, dec: -30.417, mag: 8.9, type: 20, luminosity: 5, expected: 'A0V', velocity: 6, wantedSnr: 80, priority: 1, note: 'spectrophotometric standard' },
  { name: 'Std Ombrel', ra: 309.642, dec: -34.108, mag: 9.2, type: 13, luminosity: 5, expected: 'B3V', velocity: -11, wantedSnr: 80, priority: 1, note: 'spectrophotometric standard' },
]

// prettier-ignore
export const DEMO_TARGETS: readonly DemoStar[] = [
  { name: 'Adrisel', ra: 128.4172, dec: -38.2305, mag: 9.6, type: 6, luminosity: 5, expected: 'O6V', velocity: 24, wantedSnr: 100, priority: 1 },
  { name: 'Belmoth', ra: 139.7318, dec: -52.6114, mag: 9.2, type: 10, luminosity: 1, expected: 'B0Ib', velocity: -18, wantedSnr: 100, priority: 2 },
  { name: 'Corvane', ra: 147.2281, dec: -24.9467, mag: 9.9, type: 11, luminosity: 5, expected: 'B1V', velocity: 12, wantedSnr: 90, priority: 2 },
  { name: 'Delthea', ra: 152.9406, dec: -61.3028, mag: 10.1, type: 15, luminosity: 3, expected: 'B5III', velocity: 31, wantedSnr: 90, priority: 3 },
  { name: 'Esmerin', ra: 161.5247, dec: -12.4193, mag: 10.3, pmRa: 14.2, pmDec: -8.1, type: 20, luminosity: 5, expected: 'A0V', velocity: -7, wantedSnr: 70, priority: 3 },
  { name: 'Fendral', ra: 158.1035, dec: -33.7452, mag: 9.7, type: 48, luminosity: 3, expected: 'G8III', velocity: 44, wantedSnr: 80, priority: 2 },
  { name: 'Galvyn', ra: 172.6483, dec: -45.1179, mag: 9.4, type: 22, luminosity: 1, expected: 'A2Ia', velocity: -26, wantedSnr: 90, priority: 2 },
  { name: 'Hespora', ra: 180.3327, dec: -8.6241, mag: 8.3, pmRa: -31.5, pmDec: 12.7, type: 25, luminosity: 5, expected: 'A5V', velocity: 3, wantedSnr: 90, priority: 1 },
  { name: 'Ithrane', ra: 186.9219, dec: -29.3386, mag: 10.4, pmRa: 22.4, pmDec: -17.3, type: 30, luminosity: 5, expected: 'F0V', velocity: 18, wantedSnr: 80, priority: 3 },
  { name: 'Jorvale', ra: 191.4065, dec: -57.0213, mag: 9.5, type: 35, luminosity: 1, expected: 'F5Ib', velocity: -37, wantedSnr: 80, priority: 2 },
  { name: 'Kestimar', ra: 196.8114, dec: -18.2068, mag: 10.6, pmRa: 48.9, pmDec: -35.2, type: 35, luminosity: 5, expected: 'F5V', velocity: 27, wantedSnr: 80, priority: 3 },
  { name: 'Lorwen', ra: 199.5378, dec: -40.7335, mag: 10.8, pmRa: -64.1, pmDec: 20.6, type: 40, luminosity: 5, expected: 'G0V', velocity: -14, wantedSnr: 80, priority: 3 },
  { name: 'Mirovel', ra: 207.1492, dec: -2.9147, mag: 10.9, pmRa: 71.3, pmDec: -88.4, type: 42, luminosity: 5, expected: 'G2V', velocity: 9, wantedSnr: 80, priority: 2 },
  { name: 'Nerathis', ra: 212.6254, dec: -34.4082, mag: 10, type: 45, luminosity: 3, expected: 'G5III', velocity: -22, wantedSnr: 80, priority: 3 },
  { name: 'Olwedd', ra: 218.0361, dec: -49.8276, mag: 9.3, type: 42, luminosity: 1, expected: 'G2Ib', velocity: 33, wantedSnr: 80, priority: 2 },
  { name: 'Pellandor', ra: 223.3148, dec: -22.1394, mag: 9.8, type: 50, luminosity: 3, expected: 'K0III', velocity: 52, wantedSnr: 80, priority: 1 },
  { name: 'Quorine', ra: 229.9273, dec: -11.7058, mag: 11, pmRa: -112.8, pmDec: -64.9, type: 52, luminosity: 5, expected: 'K2V', velocity: -31, wantedSnr: 60, priority: 2 },
  { name: 'Rastivel', ra: 231.2406, dec: -63.5127, mag: 9.6, type: 53, luminosity: 3, expected: 'K3III', velocity: 16, wantedSnr: 60, priority: 3 },
  { name: 'Selmora', ra: 238.4529, dec: -28.0315, mag: 10.9, pmRa: 204.5, pmDec: -151.2, type: 55, luminosity: 5, expected: 'K5V', velocity: -8, wantedSnr: 60, priority: 2 },
  { name: 'Tavrine', ra: 244.7183, dec: -5.2264, mag: 9.4, type: 55, luminosity: 3, expected: 'K5III', velocity: -46, wantedSnr: 60, priority: 3 },
  { name: 'Ulmeret', ra: 250.5094, dec: -43.6441, mag: 11.2, pmRa: -318.2, pmDec: 96.7, type: 60, luminosity: 5, expected: 'M0V', velocity: 22, wantedSnr: 50, priority: 1 },
  { name: 'Vexalin', ra: 256.9362, dec: -19.8079, mag: 9.5, type: 62, luminosity: 3, expected: 'M2III', velocity: -19, wantedSnr: 50, priority: 3 },
  { name: 'Wyndrel', ra: 262.3277, dec: -55.9208, mag: 11.3, pmRa: 402.6, pmDec: -377.9, type: 63, luminosity: 5, expected: 'M3V', velocity: 37, wantedSnr: 40, priority: 1 },
  { name: 'Xanthir', ra: 266.0418, dec: -36.1183, mag: 9.2, type: 62, luminosity: 1, expected: 'M2Ib', velocity: 11, wantedSnr: 50, priority: 2 },
  { name: 'Yolvane', ra: 274.8236, dec: -14.9352, mag: 9.6, type: 12, luminosity: 5, expected: 'B2V', velocity: -5, wantedSnr: 90, priority: 2 },
  { name: 'Zephrine', ra: 281.3105, dec: -30.6247, mag: 9.5, type: 9, luminosity: 3, expected: 'O9III', velocity: 28, wantedSnr: 90, priority: 1 },
  { name: 'Arquell', ra: 288.7251, dec: -47.4116, mag: 10.3, pmRa: 18.1, pmDec: 9.4, type: 27, luminosity: 5, expected: 'A7V', velocity: -12, wantedSnr: 80, priority: 3 },
  { name: 'Brinmoor', ra: 295.1364, dec: -21.0283, mag: 10.6, pmRa: -57.2, pmDec: -41.8, type: 38, luminosity: 5, expected: 'F8V', velocity: 41, wantedSnr: 80, priority: 3 },
  { name: 'Cindrel', ra: 300.6082, dec: -9.3175, mag: 9.3, type: 18, luminosity: 1, expected: 'B8Ia', velocity: -16, wantedSnr: 90, priority: 2 },
  { name: 'Dorvath', ra: 305.9147, dec: -60.2394, mag: 9.9, type: 50, luminosity: 3, expected: 'K0III', velocity: 7, wantedSnr: 80, priority: 2 },
]

/** What goes wrong on the troubled night, at the step that names it. */
export type DemoTrouble =
  | 'wrong star'
  | 'saturated'
  | 'too faint'
  | 'cosmic ray'
  | 'truncated'
  | 'missing arc'
  | 'sky over-subtracted'
  | 'clock slip'
  | 'duplicate'
  | 'lamp off'
  | 'not observed'
  | 'emission'

/** How a quick-look spectrum is stored. */
export type DemoForm = 'image' | 'image with sigma' | 'table' | 'vacuum table' | 'gzip'

/** One step of the night: `count` frames of a kind, the clock running on; `at` waits for a time of the day (UTC). */
export interface DemoStep {
  readonly kind: 'bias' | 'dark' | 'flat' | 'skyflat' | 'arc' | 'focus' | 'acquisition' | 'standard' | 'science'
  readonly setup: DemoSetupName
  /** Seconds. */
  readonly exposure: number
  readonly count?: number
  readonly star?: string
  readonly at?: string
  readonly form?: DemoForm
  readonly trouble?: DemoTrouble
}

export const DEMO_DATE = '2026-05-16'
/** Seconds from the end of an exposure to the start of the next: reading out, pointing, turning the grating. */
export const DEMO_OVERHEAD = { readout: 14, pointing: 150, grating: 45 } as const

/** From this time (UTC, hours from the start of DEMO_DATE) the red scale of the troubled night is off by so many Å. */
export const DEMO_JUMP = { hour: 31.7, setup: 'red', shift: 5 } as const

/** Figures of the planted troubles. */
export const DEMO_OFFSETS = {
  /** The star in the slit instead of the one listed, and how far beside it lies. */
  wrongStar: { type: 25, luminosity: 5 },
  wrongArcmin: 6.4,
  brighterBy: -2.7,
  cloudMagnitudes: 4.4,
  clockHours: -4,
  truncatedTo: 0.55,
  /** A cosmic ray on Hβ. */
  hit: { wavelength: 4861.8, height: 2.2 },
  oversubtract: { wavelength: 5577.34, share: 1.3 },
} as const

const science = (star: string, setup: DemoSetupName, exposure: number, more: Partial<DemoStep> = {}): DemoStep => ({
  kind: 'science',
  star,
  setup,
  exposure,
  form: 'table',
  ...more,
})
const arc = (setup: DemoSetupName): DemoStep => ({
  kind: 'arc',
  setup,
  exposure: setup === 'blue' ? 20 : 8,
  ...(setup === 'red' ? { trouble: 'missing arc' } : {}),
})
const acquisition = (star: string): DemoStep => ({ kind: 'acquisition', star, setup: 'blue', exposure: 4 })

export const DEMO_PLAN: readonly DemoStep[] = [
  { kind: 'bias', setup: 'blue', exposure: 0, count: 7, at: '20:36' },
  { kind: 'dark', setup: 'blue', exposure: 600, count: 3 },
  { kind: 'flat', setup: 'blue', exposure: 6, count: 4 },
  { kind: 'flat', setup: 'red', exposure: 4, count: 1 },
  { kind: 'flat', setup: 'red', exposure: 4, count: 1, trouble: 'lamp off' },
  { kind: 'flat', setup: 'red', exposure: 4, count: 3 },
  { kind: 'skyflat', setup: 'blue', exposure: 5, count: 2, at: '22:21' },
  { kind: 'focus', setup: 'blue', exposure: 5, count: 2, at: '22:52' },
  acquisition('Std Halcyr'),
  { kind: 'standard', star: 'Std Halcyr', setup: 'blue', exposure: 240, form: 'table', at: '23:06' },
  arc('blue'),
  { kind: 'standard', star: 'Std Halcyr', setup: 'red', exposure: 240, form: 'table' },
  arc('red'),
  acquisition('Adrisel'),
  science('Adrisel', 'blue', 300),
  science('Belmoth', 'blue', 240),
  science('Corvane', 'blue', 360, { form: 'image with sigma' }),
  science('Delthea', 'blue', 420, { trouble: 'clock slip' }),
  arc('blue'),
  science('Esmerin', 'blue', 720, { form: 'image' }),
  science('Fendral', 'blue', 480),
  science('Fendral', 'red', 240),
  arc('red'),
  science('Galvyn', 'blue', 300, { at: '00:52' }),
  science('Hespora', 'blue', 90, { trouble: 'saturated', form: 'image with sigma' }),
  science('Ithrane', 'blue', 540),
  science('Ithrane', 'red', 300),
  arc('red'),
  arc('blue'),
  science('Jorvale', 'blue', 300, { form: 'vacuum table' }),
  science('Kestimar', 'blue', 600, { trouble: 'cosmic ray', form: 'image with sigma' }),
  science('Lorwen', 'blue', 660, { trouble: 'truncated' }),
  arc('blue'),
  science('Mirovel', 'blue', 720, { trouble: 'sky over-subtracted', at: '02:50' }),
  science('Mirovel', 'red', 480),
  arc('red'),
  science('Nerathis', 'red', 240),
  science('Nerathis', 'blue', 540, { trouble: 'duplicate' }),
  science('Olwedd', 'blue', 420, { form: 'image with sigma' }),
  arc('blue'),
  acquisition('Pellandor'),
  science('Pellandor', 'blue', 540, { trouble: 'wrong star' }),
  science('Quorine', 'blue', 900, { trouble: 'too faint', form: 'image with sigma' }),
  science('Rastivel', 'blue', 600, { form: 'gzip' }),
  arc('blue'),
  science('Selmora', 'blue', 900, { at: '04:46' }),
  science('Selmora', 'red', 480),
  arc('red'),
  science('Tavrine', 'blue', 540),
  science('Ulmeret', 'blue', 1200, { form: 'image with sigma' }),
  arc('blue'),
  science('Ulmeret', 'red', 600),
  science('Vexalin', 'red', 240),
  arc('red'),
  science('Vexalin', 'blue', 600),
  science('Wyndrel', 'blue', 1500),
  arc('blue'),
  science('Wyndrel', 'red', 720),
  science('Xanthir', 'red', 240),
  arc('red'),
  science('Xanthir', 'blue', 600, { form: 'image with sigma' }),
  science('Yolvane', 'blue', 300, { trouble: 'emission', at: '07:04' }),
  arc('blue'),
  science('Yolvane', 'red', 300, { trouble: 'emission' }),
  science('Zephrine', 'red', 300),
  arc('red'),
  science('Zephrine', 'blue', 300),
  science('Arquell', 'blue', 480, { form: 'image with sigma' }),
  science('Brinmoor', 'blue', 600),
  science('Brinmoor', 'red', 300),
  arc('red'),
  science('Arquell', 'red', 300),
  arc('blue'),
  science('Cindrel', 'blue', 300, { at: '08:40' }),
  science('Dorvath', 'blue', 480, { trouble: 'not observed' }),
  science('Dorvath', 'red', 240, { trouble: 'not observed' }),
  { kind: 'standard', star: 'Std Ombrel', setup: 'red', exposure: 300, form: 'table', at: '09:22' },
  arc('red'),
  { kind: 'standard', star: 'Std Ombrel', setup: 'blue', exposure: 300, form: 'table' },
  arc('blue'),
]
