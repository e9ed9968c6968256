import type { HeaderFacts } from '../spectrum/types.ts'

const OPEN = /^(?:none|open|clear|free|out|empty|no[ _-]?filter|-|n\/?a|)$/i

/**
 * The set-up of a frame or spectrum by its values, in a fixed order: 'SPRAT, Wasatch600 blue, slit 1.8, 2x2'; an
 * instrument or value the header does not give is left out; 'not stated' when it gives none.
 */
export function setupName(facts: HeaderFacts): string {
  const parts = [
    facts.instrument,
    [facts.grating, facts.gratingTilt === undefined ? undefined : `tilt ${trim(facts.gratingTilt)}`]
      .filter((part) => part !== undefined)
      .join(' '),
    isPlain(facts.filter) ? undefined : `filter ${facts.filter ?? ''}`,
    facts.slit === undefined ? undefined : /slit/i.test(facts.slit) ? facts.slit : `slit ${facts.slit}`,
    facts.binning,
    facts.window === undefined ? undefined : `window ${facts.window}`,
  ].filter((part) => part !== undefined && part !== '')
  return parts.length ? parts.join(', ') : 'not stated'
}

/** True where the beam meets no filter worth a word. */
function isPlain(filter: string | undefined): boolean {
  return filter === undefined || filter.split(/[;,+]/).every((one) => OPEN.test(one.trim()))
}

function trim(value: number): string {
  return String(Number(value.toPrecision(6)))
}

/** Facts that must agree for a bias or dark to fit a frame: how the detector was read. */
const READOUT = ['instrument', 'detector', 'binning', 'window', 'gain'] as const
/** Facts that must agree for a flat or arc too: the way of the light. */
const OPTICS = ['grating', 'gratingTilt', 'filter', 'slit'] as const

export type SetupFact = (typeof READOUT)[number] | (typeof OPTICS)[number]

/** The facts in which two frames differ; a fact that either header does not give does not differ. */
export function setupDifferences(a: HeaderFacts, b: HeaderFacts, parts: 'readout' | 'all'): readonly SetupFact[] {
  const facts: readonly SetupFact[] = parts === 'readout' ? READOUT : [...READOUT, ...OPTICS]
  return facts.filter((fact) => {
    const [x, y] = [a[fact], b[fact]]
    if (x === undefined || y === undefined) return false
    if (typeof x === 'number' && typeof y === 'number')
      return Math.abs(x - y) > 1e-3 * Math.max(Math.abs(x), Math.abs(y))
    return plain(x) !== plain(y)
  })
}

function plain(value: string | number): string {
  return String(value)
    .toLowerCase()
    .replace(/[\s_]+/g, '')
}
