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
    changed: 'means of three or more stars of a type at rest; from 7400 Å on of the type averages of Pickles 1998',
  },
  inglis1939: { citation: 'Inglis & Teller 1939, ApJ 90, 439', doi: '10.1086/144118', fromMemory: true },
  martin1999: { citation: 'Martín et al. 1999, AJ 118, 2466 (PC3)', doi: '10.1086/301107', fromMemory: true },
  planck: { citation: "Planck's law with the exact SI values of h, c and k" },
  conti1970: { citation: 'Conti 1970, PASP 82, 781', doi: '10.1086/128965', fromMemory: true },
  kindsAtlas: { citation: 'what ordinary stars of Jacoby et al. 1984 and Pickles 1998 reach, measured here' },
  memory: { citation: 'written down from memory', fromMemory: true },
  dirac: {
    citation:
      'centre of gravity of the fine structure from the Dirac equation, constants of CODATA 2018; air by Ciddor 1996',
  },
  rydberg: {
    citation: 'Rydberg formula with the reduced mass of hydrogen, constants of CODATA 2018; air by Ciddor 1996',
    doi: '10.1103/RevModPhys.93.025010',
  },
  nistHelium: { citation: 'NIST Atomic Spectra Database, He I', changed: 'vacuum to air by Ciddor 1996' },
  nistIron: { citation: 'NIST Atomic Spectra Database, Fe I and Fe II', changed: 'vacuum to air by Ciddor 1996' },
  nistMercury: { citation: 'NIST Atomic Spectra Database, Hg I' },
  nistLines: {
    citation: 'NIST Atomic Spectra Database',
    changed: 'vacuum to air by Ciddor 1996; level names from memory',
  },
  surveyLines: { citation: 'emission-line and night-sky line lists of a public sky survey, seen in a copy' },
  osterbrock1992: { citation: 'Osterbrock & Martel 1992, PASP 104, 76', doi: '10.1086/132961' },
  dib: { citation: 'diffuse interstellar bands, wavelengths written down from memory', fromMemory: true },
  pickles1998: { citation: 'Pickles 1998, PASP 110, 863', doi: '10.1086/316197' },
  worthey1994: {
    citation: 'Worthey 1994, ApJS 95, 107; Trager, Worthey, Faber, Burstein & González 1998, ApJS 116, 1',
    doi: '10.1086/192087',
  },
  worthey1997: { citation: 'Worthey & Ottaviani 1997, ApJS 111, 377', doi: '10.1086/313021' },
  windows: { citation: 'windows chosen for this program on published stars, by cross-validation' },
  fraunhofer: {
    citation: 'extents of the Fraunhofer bands A, B and a; of the water bands: handbook values',
    fromMemory: true,
  },
  oxygen: {
    citation:
      'O2 b-X system: ground state B = 1.437676, D = 4.84e-6, λ = 1.984751, γ = -0.008425; upper states ν0 = 13120.909 and 14525.66, B = 1.39125 and 1.372955 (cm-1); energies after Schlapp 1937, Phys. Rev. 51, 342',
    fromMemory: true,
    changed: 'converted to air, lines closer than 0.12 Å joined',
  },
} as const satisfies Record<string, Source>
