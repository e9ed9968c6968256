import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import { planeRole } from './planeRole.ts'
import type { PlaneRole } from './planeRole.ts'

/** What the rows of a 2-D image hold when they belong to one spectrum. */
export interface RowLayout {
  readonly roles: readonly (PlaneRole | undefined)[]
  readonly words: string
  /** True when the file itself names its rows; false when a survey's documentation does. */
  readonly isNamed: boolean
}

/** Surveys that store the planes of one spectrum as the rows of an image, by their documentation. */
const SURVEYS: readonly {
  readonly is: (headers: Headers, rows: number) => boolean
  readonly roles: readonly PlaneRole[]
  readonly words: string
}[] = [
  {
    is: (headers, rows) => /lamost|guoshoujing/i.test(cardText(headers, 'TELESCOP') ?? '') && rows === 5,
    roles: ['flux', 'inverse variance', 'wavelength', 'other', 'other'],
    words: 'rows flux, inverse variance, wavelength, masks by the documentation of the survey',
  },
  {
    is: (headers, rows) =>
      /sdss/i.test(cardText(headers, 'TELESCOP') ?? '') &&
      rows >= 4 &&
      rows <= 6 &&
      cardNumber(headers, 'COEFF0') !== undefined,
    roles: ['flux', 'normalised', 'sigma', 'other', 'other', 'other'],
    words: 'rows flux, continuum-subtracted flux, sigma, masks by the documentation of the survey',
  },
  {
    is: (headers, rows) =>
      rows >= 3 && rows <= 4 && cardText(headers, 'OBSRUN') !== undefined && cardText(headers, 'PIVOT') !== undefined,
    roles: ['flux', 'variance', 'sky', 'other'],
    words: 'rows flux, variance, sky by the documentation of the survey',
  },
]

/**
 * The layout of an image whose rows are the planes of one spectrum, from cards that name them (ARRAYn, ROWn, PLANEn)
 * or a survey's documented one; undefined when nothing says so.
 */
export function rowLayout(headers: Headers, rows: number): RowLayout | undefined {
  for (const stem of ['ARRAY', 'ROW', 'PLANE', 'LAYER', 'IMROW']) {
    const names = Array.from({ length: rows }, (_, i) => cardText([headers[0]], `${stem}${i + 1}`))
    if (names[0] === undefined || rows < 2) continue
    const roles = names.map((name) => (name === undefined ? undefined : planeRole(name)))
    if (roles.includes('flux')) return { roles, words: `rows named by ${stem}n`, isNamed: true }
  }
  const survey = SURVEYS.find(({ is }) => is(headers, rows))
  return survey && { roles: survey.roles.slice(0, rows), words: survey.words, isNamed: false }
}
