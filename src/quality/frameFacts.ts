import type { HeaderFacts } from '../spectrum/types.ts'
import type { Thresholds } from '../tables/types.ts'
import { checkFrame } from './checkFrame.ts'
import { qualityOf } from './qualityOf.ts'
import { setupName } from './setupName.ts'
import { sortFrame } from './sortFrame.ts'
import type { FrameFacts, FrameKind, FrameStatistics } from './types.ts'

const WITH_TRACE: readonly FrameKind[] = ['science', 'standard', 'sky', 'focus', 'acquisition', 'unknown']
const WITH_LINES: readonly FrameKind[] = ['arc', 'unknown']

/**
 * The row of a file as a frame: its kind and how that was known, set-up, statistics, findings and quality. A file of
 * extracted spectra has no statistics and is science unless its header says otherwise. Statistics that mean nothing
 * for the kind are left out: the trace of a lamp frame, the arc lines of a star.
 */
export function frameFacts(
  facts: HeaderFacts,
  statistics: FrameStatistics | undefined,
  thresholds: Thresholds,
): FrameFacts {
  const sorted = sortFrame(facts, statistics)
  const base = { kindHow: sorted.kindHow, setup: setupName(facts), facts }
  if (!statistics)
    return { ...base, kind: sorted.kind === 'unknown' ? 'science' : sorted.kind, quality: 'usable', findings: [] }
  const findings = checkFrame(sorted, facts, statistics, thresholds)
  const { arcLines, arcPeak, trace, traceContrast, ...rest } = statistics
  return {
    ...base,
    kind: sorted.kind,
    statistics: {
      ...rest,
      ...(WITH_LINES.includes(sorted.kind) ? { arcLines, arcPeak } : {}),
      ...(WITH_TRACE.includes(sorted.kind) ? { trace, traceContrast } : {}),
    },
    quality: qualityOf(findings),
    findings,
  }
}
