/**
 * Colours of pages. The hues are those of Okabe & Ito 2008, "Color Universal Design", told apart by all common kinds
 * of colour vision; each also differs by line style, width or shape, so that a grey print says the same.
 */
export const PALETTE = {
  /** Text and the measured spectrum. */
  ink: '#1a1a1a',
  /** Secondary text: contrast 5.7 to 1 on white (WCAG 2.1 asks for 4.5). */
  quiet: '#666666',
  /** Rules and frames. */
  rule: '#b5b5b5',
  /** Grounds of rows and bands. */
  wash: '#eeeeec',
  shade: '#d2d2cf',
  paper: '#ffffff',
  /** Okabe & Ito "vermillion": the continuum, and what needs attention. */
  vermillion: '#d55e00',
  /** Okabe & Ito "sky blue": what was expected. */
  sky: '#56b4e9',
  /** Okabe & Ito "blue": links and probability. */
  blue: '#0072b2',
  /** Okabe & Ito "bluish green": in order. */
  green: '#009e73',
  /** Okabe & Ito "orange": doubtful. */
  orange: '#e69f00',
} as const

/** A grey of the given lightness, 0 black to 1 white. */
export function grey(lightness: number): string {
  const level = Math.round(255 * Math.min(1, Math.max(0, lightness)))
  return `#${level.toString(16).padStart(2, '0').repeat(3)}`
}
