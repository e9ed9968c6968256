import { quantile } from '../numeric/median.ts'
import type { Curves, SpectrumOutcome } from '../quality/types.ts'
import type { Evidence, TypePosterior } from '../typing/types.ts'
import type { Block, Item } from './drawing.ts'
import { stroke } from './drawing.ts'
import { legend } from './legend.ts'
import { PALETTE } from './palette.ts'
import { plate } from './plate.ts'
import type { Frame } from './plot.ts'
import { atX, curve, heldY, xAxis, yAxis } from './plot.ts'
import type { Area } from './spectrumFigure.ts'
import { absentFigure, AXIS_ROOM, figureHeading, isDrawable, HEADING_ROOM, LABEL_ROOM } from './spectrumFigure.ts'
import { spread } from './spread.ts'
import type { Typeface } from './typeface.ts'
import { featureWord, percent, typeFound } from './words.ts'

const NAME_ROOM = 30
const NAME_SIZE = 7
const PLATE_HEIGHT = 9
/** Features named: the first ones by share until they hold this part of the decision. */
const NAMED_SHARE = 0.95
const MOST_NAMED = 14
/** Part in the decision below which a feature is not named. */
const LEAST_NAMED = 0.01
/** Å within which measures are of one line. */
const SAME_LINE = 4

interface Named {
  /** Of all measures of the line in the decision. */
  readonly share: number
  readonly wavelength: number
  readonly label: string
}

/**
 * The features that decided and lie inside the frame, several measures of one line as one, in order of wavelength, no
 * more than their labels have room.
 */
export function namedFeatures(
  face: Typeface,
  spectrum: SpectrumOutcome,
  evidence: readonly Evidence[],
  frame: Frame,
): Named[] {
  const places = new Map(spectrum.measurements.map((m) => [m.feature, m.wavelengthRest]))
  const groups: Named[] = []
  for (const one of evidence) {
    const wavelength = places.get(one.feature)
    if (wavelength === undefined || wavelength < frame.xRange[0] || wavelength > frame.xRange[1]) continue
    const k = groups.findIndex((g) => Math.abs(g.wavelength - wavelength) < SAME_LINE)
    if (k < 0) groups.push({ share: one.share, wavelength, label: featureWord(one.feature) })
    else groups[k] = { ...groups[k], share: groups[k].share + one.share, label: lineWord(groups[k].label) }
  }
  const ranked = groups.sort((a, b) => b.share - a.share)
  const whole = evidence.reduce((total, one) => total + one.share, 0)
  const named: Named[] = []
  let room = frame.width
  let sum = 0
  for (const one of ranked) {
    if (sum >= NAMED_SHARE * whole || named.length >= MOST_NAMED || one.share < LEAST_NAMED) break
    sum += one.share
    room -= labelWidth(face, one.label)
    if (room < 0) break
    named.push(one)
  }
  return named.sort((a, b) => a.wavelength - b.wavelength)
}

/** The line's own name, where several measures of one line share a label: 'Hδ' of 'HδA', 'Ca K' of 'Ca K core'. */
const lineWord = (label: string): string => label.replace(/ (core|wide|narrow)$/, '').replace(/^(H[αβγδε])[A-Z]$/, '$1')

const labelWidth = (face: Typeface, label: string): number =>
  Math.max(face.width(label, NAME_SIZE, 'bold'), face.width('88 %', 6.5, 'regular')) + 5

/** From a fifth below the deepest line (or zero) to above the continuum, in steps of 0.2 below. */
function depthRange(normalised: ArrayLike<number>): readonly [number, number] {
  const deepest = quantile(normalised, 0.001)
  const low = deepest < 0 ? Math.max(-0.5, deepest) : Math.max(0, Math.floor((deepest - 0.06) * 5) / 5)
  return [Math.min(0.8, low), Math.min(6, Math.max(1.1, quantile(normalised, 0.998) + 0.04))]
}

/** Lowest flux near a wavelength, where a feature's line ends; 1 when nothing is there. */
function fluxNear(curves: Curves, wavelength: number): number {
  let lowest = Infinity
  for (let i = 0; i < curves.restWavelength.length; i++)
    if (Math.abs(curves.restWavelength[i] - wavelength) < 6 && curves.normalised[i] < lowest)
      lowest = curves.normalised[i]
  return Number.isFinite(lowest) ? lowest : 1
}

/** Labels above the frame and lines from each to its feature. */
function nameItems(face: Typeface, frame: Frame, named: readonly Named[], curves: Curves): Item[] {
  const wanted = named.map((n) => atX(frame, n.wavelength))
  const centres = spread(
    wanted,
    named.map((n) => labelWidth(face, n.label)),
    frame.x,
    frame.x + frame.width,
  )
  const top = frame.y - NAME_ROOM
  return named.flatMap((n, i): Item[] => {
    const x = wanted[i]
    const foot = Math.max(frame.y + 2, heldY(frame, fluxNear(curves, n.wavelength)) - 2)
    return [
      face.text(centres[i], top + 7, n.label, { size: NAME_SIZE, weight: 'bold', anchor: 'middle' }),
      face.text(centres[i], top + 15, percent(n.share), {
        size: 6.5,
        colour: PALETTE.quiet,
        anchor: 'middle',
      }),
      {
        draw: 'path',
        points: Float64Array.of(centres[i], top + 18, centres[i], top + 20, x, frame.y - 1, x, foot),
        stroke: PALETTE.quiet,
        width: 0.4,
      },
    ]
  })
}

/**
 * The normalised spectrum at rest over the one expected of the best type, the features that decided named at their
 * place with their part in the decision, and both spectra once more as strips of grey, one above the other.
 */
export function normalisedFigure(face: Typeface, area: Area, spectrum: SpectrumOutcome, type: TypePosterior): Block {
  const heading = 'Normalised, at rest, and what decided'
  const curves = spectrum.curves
  if (!curves || !isDrawable(curves.normalised)) {
    const why = curves ? 'not drawn: there is no continuum to divide by' : 'not drawn: no curves were kept'
    return absentFigure(face, area, heading, why)
  }
  const expected = curves.expected && isDrawable(curves.expected) ? curves.expected : undefined
  const plates = expected ? 2 : 1
  const [first, last] = [curves.restWavelength[0], curves.restWavelength[curves.restWavelength.length - 1]]
  const strips = plates * (PLATE_HEIGHT + 2) + 4
  const frame: Frame = {
    x: area.x + AXIS_ROOM,
    y: area.y + HEADING_ROOM + NAME_ROOM + 4,
    width: area.width - AXIS_ROOM,
    height: area.height - HEADING_ROOM - NAME_ROOM - 4 - strips - LABEL_ROOM,
    xRange: last > first ? [first, last] : [first - 1, first + 1],
    yRange: depthRange(curves.normalised),
  }
  const named = namedFeatures(face, spectrum, type.evidence, frame)
  const isTyped = type.state === 'typed' || type.state === 'wide'
  const best = isTyped
    ? `at ${type.spectralType ?? typeFound(type)} ${type.luminosityClass ?? ''}`.trim()
    : 'of the nearest type'
  const measured = { label: 'this spectrum', stroke: PALETTE.ink, width: 0.5 }
  const model = { label: `expected ${best}, smoothed, level matched`, stroke: PALETTE.sky, width: 2 }
  const one = heldY(frame, 1)
  const items: Item[] = [
    figureHeading(face, area, heading),
    ...legend(face, area.x + area.width, area.y + 8, expected ? [measured, model] : [measured]),
    stroke([frame.x, one], [frame.x + frame.width, one], PALETTE.rule, { width: 0.5, dash: [1, 2] }),
    ...yAxis(face, frame, 'flux ÷ continuum'),
  ]
  if (expected) items.push(curve(frame, curves.restWavelength, expected, { stroke: model.stroke, width: model.width }))
  items.push(curve(frame, curves.restWavelength, curves.normalised, { stroke: measured.stroke, width: measured.width }))
  items.push(...nameItems(face, frame, named, curves))
  items.push(...stripItems(face, frame, curves, expected))
  const alt =
    `Normalised flux against rest wavelength from ${first.toFixed(0)} to ${last.toFixed(0)} Å` +
    (expected ? `, over the spectrum expected ${best}` : '; no expected spectrum is known for the type') +
    (named.length
      ? `. Features that decided: ${[...named]
          .sort((a, b) => b.share - a.share)
          .map((n) => `${n.label} ${percent(n.share)}`)
          .join(', ')}`
      : '')
  return { role: 'Figure', alt, items }
}

function stripItems(face: Typeface, frame: Frame, curves: Curves, expected: Float32Array | undefined): Item[] {
  const strip = (row: number): Frame => ({
    ...frame,
    y: frame.y + frame.height + 4 + row * (PLATE_HEIGHT + 2),
    height: PLATE_HEIGHT,
  })
  const label = (row: number, text: string): Item =>
    face.text(frame.x - 4, strip(row).y + PLATE_HEIGHT - 2.5, text, { size: 6.5, colour: PALETTE.quiet, anchor: 'end' })
  const items: Item[] = [label(0, 'star'), plate(strip(0), curves.restWavelength, curves.normalised)]
  if (expected) items.push(label(1, 'expected'), plate(strip(1), curves.restWavelength, expected))
  return [...items, ...xAxis(face, strip(expected ? 1 : 0), 'rest wavelength in air, Å')]
}
