import type { Site } from '../spectrum/types.ts'
import type { SettingValue } from '../settings/types.ts'
import { COVER_RULES } from '../tables/coverRules.ts'
import { THRESHOLDS } from '../tables/thresholds.ts'
import type { CoverRules, Thresholds } from '../tables/types.ts'
import { limitsInForce, SETTING_SPECS } from './settingsTable.ts'

/** The settings as the stages take them. Plain data: it crosses into worker threads. */
export interface InForce {
  readonly thresholds: Thresholds
  readonly coverRules: CoverRules
  readonly site?: Site
  readonly hashLimitBytes: number
  readonly spectraLimit: number
  readonly maximumVelocity: number
  readonly paper: 'A4' | 'Letter'
}

/** What the stages take, from values by key ('check.snr-minimum'); a key that is not given has its default. */
export function settingsInForce(values: Readonly<Record<string, SettingValue>> = {}): InForce {
  const all = { ...Object.fromEntries(SETTING_SPECS.map((spec) => [spec.key, spec.default])), ...values }
  const number = (key: string): number => Number(all[key])
  const [longitude, latitude] = [number('site.longitude'), number('site.latitude')]
  const isPlaced = Math.abs(longitude) <= 360 && Math.abs(latitude) <= 90
  return {
    thresholds: limitsInForce('check', THRESHOLDS, all),
    coverRules: limitsInForce('cover', COVER_RULES, all),
    ...(isPlaced
      ? {
          site: {
            longitude,
            latitude,
            height: number('site.height'),
            ...(all['site.name'] ? { name: String(all['site.name']) } : {}),
          },
        }
      : {}),
    hashLimitBytes: number('read.hash-limit') * 1024 * 1024,
    spectraLimit: number('read.spectra-limit'),
    maximumVelocity: number('velocity.maximum'),
    paper: all['pages.paper'] === 'Letter' ? 'Letter' : 'A4',
  }
}
