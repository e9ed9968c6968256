import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { Exposure } from './exposures.ts'
import { isOnSky } from './exposures.ts'

/** The finding of a night whose times are off by whole hours. */
export function slipFinding(slip: number, exposures: readonly Exposure[]): Finding {
  const count = exposures.filter(({ kind }) => isOnSky(kind)).length
  const hours = `${Math.abs(slip)} ${Math.abs(slip) === 1 ? 'hour' : 'hours'}`
  const text = `The times of the ${count} exposures on the sky fit their airmasses and hour angles when moved ${hours} ${slip > 0 ? 'later' : 'earlier'}: they are not UTC`
  return finding(NIGHT_RULES, 'time-zone-slip', text, { value: slip, limit: 0 })
}
