import type { Source } from './types.ts'

/** Every origin of a figure in this folder. Keys are first author and year, or the standard's short name. */
export const SOURCES = {
  common: { citation: 'common practice, no source' },
  fits4: {
    citation: 'FITS Standard 4.0 (IAU FITS Working Group 2018); Pence et al. 2010, A&A 524, A42',
    doi: '10.1051/0004-6361/201015362',
  },
  ciddor1996: { citation: 'Ciddor 1996, Applied Optics 35, 1566', doi: '10.1364/AO.35.001566' },
  jacoby1984: {
    citation: 'Jacoby, Hunter & Christian 1984, ApJS 56, 257 (CDS III/92)',
    changed: 'means of three or more stars of a type, at rest',
  },
} as const satisfies Record<string, Source>
