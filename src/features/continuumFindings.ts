import type { Continuum } from '../continuum/types.ts'
import { FEATURE_RULES } from '../findings/features.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'

/** Share of the bins that should carry a continuum; made stars of types O to M have 0.35 and more. */
const LEAST_SUPPORT = 0.15

/** What the continuum of a spectrum has to say for itself. */
export function continuumFindings({ level, isPseudo, supported, noiseFrom }: Continuum): Finding[] {
  if (!level.some((value) => value > 0))
    return [finding(FEATURE_RULES, 'no-continuum', 'no continuum could be set, too little light or too few samples')]
  const findings: Finding[] = []
  if (isPseudo)
    findings.push(
      finding(
        FEATURE_RULES,
        'pseudo-continuum',
        'lines or bands crowd the spectrum and the level is a pseudo-continuum',
      ),
    )
  if (supported < LEAST_SUPPORT)
    findings.push(
      finding(
        FEATURE_RULES,
        'continuum-unsupported',
        `the continuum rests on ${Math.round(100 * supported)} % of the spectrum, under ${100 * LEAST_SUPPORT} %`,
        { value: supported, limit: LEAST_SUPPORT },
      ),
    )
  if (noiseFrom === 'measured')
    findings.push(
      finding(FEATURE_RULES, 'noise-not-in-file', 'the file states no uncertainty and the noise was measured'),
    )
  return findings
}
