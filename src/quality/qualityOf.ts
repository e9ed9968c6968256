import type { Finding } from '../findings/types.ts'
import type { Quality } from './types.ts'

/** Quality by the worst finding: a fault makes unusable, a doubt doubtful, notes leave usable. */
export function qualityOf(findings: readonly Finding[]): Quality {
  if (findings.some(({ level }) => level === 'fault')) return 'unusable'
  return findings.some(({ level }) => level === 'doubt') ? 'doubtful' : 'usable'
}

const RANK = { fault: 0, doubt: 1, note: 2 } as const

/** Findings with the gravest first, otherwise in their order. */
export function gravestFirst(findings: readonly Finding[]): readonly Finding[] {
  return [...findings].sort((a, b) => RANK[a.level] - RANK[b.level])
}
