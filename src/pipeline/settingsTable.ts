import type { SettingSpec } from '../settings/types.ts'
import { COVER_RULES } from '../tables/coverRules.ts'
import { SOURCES } from '../tables/sources.ts'
import { THRESHOLDS } from '../tables/thresholds.ts'

/** 'snrMinimum' as 'snr-minimum'. */
function hyphenated(name: string): string {
  return name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)
}

interface Limit {
  readonly value: number
  readonly unit: string
  readonly reason: string
  readonly source: string
}

function fromLimits(section: string, limits: Readonly<Record<string, Limit>>): SettingSpec[] {
  return Object.entries(limits).map(([name, { value, unit, reason, source }]) => ({
    key: `${section}.${hyphenated(name)}`,
    default: value,
    ...(unit === '1' ? {} : { unit }),
    ...(value >= 0 ? { min: 0 } : {}),
    meaning: reason[0].toUpperCase() + reason.slice(1),
    source: (SOURCES as Readonly<Record<string, { readonly citation: string }>>)[source]?.citation ?? source,
  }))
}

const OWN = 'choice of this program'

/** Every setting of the program with its default: the one list behind `darkline settings`, --config and the README. */
export const SETTING_SPECS: readonly SettingSpec[] = [
  { key: 'site.name', default: '', meaning: 'Name of the observatory, where the header is silent', source: OWN },
  {
    key: 'site.longitude',
    default: 999,
    unit: '°',
    min: -180,
    max: 999,
    meaning: 'Longitude of the telescope, east positive, where the header is silent; 999 for not known',
    source: OWN,
  },
  {
    key: 'site.latitude',
    default: 999,
    unit: '°',
    min: -90,
    max: 999,
    meaning: 'Latitude of the telescope, north positive, where the header is silent; 999 for not known',
    source: OWN,
  },
  {
    key: 'site.height',
    default: 0,
    unit: 'm',
    min: -500,
    max: 9000,
    meaning: 'Height of the telescope above the sea, where the header is silent',
    source: OWN,
  },
  {
    key: 'read.hash-limit',
    default: 512,
    unit: 'MiB',
    min: 0,
    meaning: 'Size of file above which no SHA-256 is computed, since it costs reading the whole file',
    source: OWN,
  },
  { key: 'read.spectra-limit', default: 20000, min: 1, meaning: 'Most spectra taken from one file', source: OWN },
  {
    key: 'velocity.maximum',
    default: 700,
    unit: 'km/s',
    min: 50,
    max: 3000,
    meaning: 'Largest velocity looked for, either way',
    source: OWN,
  },
  { key: 'pages.paper', default: 'A4', choices: ['A4', 'Letter'], meaning: 'Paper of the PDF pages', source: OWN },
  ...fromLimits('check', THRESHOLDS),
  ...fromLimits('cover', COVER_RULES),
]

/** The limits of one section with the values in force. */
export function limitsInForce<Limits extends Readonly<Record<string, Limit>>>(
  section: string,
  limits: Limits,
  values: Readonly<Record<string, unknown>>,
): Limits {
  return Object.fromEntries(
    Object.entries(limits).map(([name, limit]) => {
      const value = values[`${section}.${hyphenated(name)}`]
      return [name, typeof value === 'number' ? { ...limit, value } : limit]
    }),
  ) as Limits
}
