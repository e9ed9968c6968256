import { quantile } from '../numeric/median.ts'
import type { SpectrumOutcome } from '../quality/types.ts'
import type { Block, Item } from './drawing.ts'
import { legend } from './legend.ts'
import { PALETTE } from './palette.ts'
import type { Frame } from './plot.ts'
import { curve, xAxis, yAxis } from './plot.ts'
import type { Typeface } from './typeface.ts'

/** Where a figure may stand. */
export interface Area {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

/** Room left of a frame for the labels of its y axis. */
export const AXIS_ROOM = 34
/** Room above a frame for a figure's heading, and below for the labels of its x axis. */
export const HEADING_ROOM = 14
export const LABEL_ROOM = 14

/** The heading of a figure: bold, at the top left of its area. */
export function figureHeading(face: Typeface, area: Area, text: string): Item {
  return face.text(area.x, area.y + 8, text, { size: 8.5, weight: 'bold' })
}

/** A figure that cannot be drawn: its heading and the reason, in words; it takes no box. */
export function absentFigure(face: Typeface, area: Area, heading: string, reason: string): Block {
  return {
    role: 'P',
    items: [
      figureHeading(face, area, heading),
      face.text(area.x, area.y + 21, reason, { size: 8, colour: PALETTE.quiet, fit: area.width }),
    ],
  }
}

/** Range of the flux axis: zero or the 0.2 % quantile up to the 99.8 % quantile or the continuum's top, with margin. */
function fluxRange(flux: ArrayLike<number>, continuum: ArrayLike<number>): readonly [number, number] {
  const low = Math.min(0, quantile(flux, 0.002))
  const top = quantile(continuum, 1)
  const high = Math.max(quantile(flux, 0.998), Number.isFinite(top) ? top : -Infinity)
  return high > low ? [low, low + (high - low) * 1.08] : [low - 1, low + 1]
}

/** The spectrum as observed with its continuum; `parts` names the files of several arms; words where nothing is drawn. */
export function spectrumFigure(face: Typeface, area: Area, spectrum: SpectrumOutcome, parts = ''): Block {
  const heading = 'Spectrum as observed, with its continuum'
  const curves = spectrum.curves
  if (!curves || !isDrawable(curves.flux))
    return absentFigure(
      face,
      area,
      heading,
      curves ? 'not drawn: fewer than two samples have a finite flux' : 'not drawn: no curves were kept',
    )
  const hasContinuum = isDrawable(curves.continuum)
  const [first, last] = [curves.wavelength[0], curves.wavelength[curves.wavelength.length - 1]]
  const frame: Frame = {
    x: area.x + AXIS_ROOM,
    y: area.y + HEADING_ROOM,
    width: area.width - AXIS_ROOM,
    height: area.height - HEADING_ROOM - LABEL_ROOM,
    xRange: last > first ? [first, last] : [first - 1, first + 1],
    yRange: fluxRange(curves.flux, curves.continuum),
  }
  const line = { label: 'flux', stroke: PALETTE.ink, width: 0.5 }
  const dashed = { label: 'continuum', stroke: PALETTE.vermillion, width: 1.1, dash: [5, 2.5] }
  const items: Item[] = [
    figureHeading(face, area, heading),
    ...(parts === '' ? [] : [partsItem(face, area, heading, parts)]),
    ...legend(face, area.x + area.width, area.y + 8, hasContinuum ? [line, dashed] : [line]),
    ...xAxis(face, frame, 'wavelength in air, Å'),
    ...yAxis(
      face,
      frame,
      `${spectrum.fluxKind === 'unknown' ? 'flux' : spectrum.fluxKind} ${spectrum.fluxUnit}`.trim(),
    ),
    curve(frame, curves.wavelength, curves.flux, { stroke: line.stroke, width: line.width }),
  ]
  if (hasContinuum) {
    const { stroke, width, dash } = dashed
    items.push(curve(frame, curves.wavelength, curves.continuum, { stroke, width, dash, column: 4 }))
  }
  const alt =
    `Flux against wavelength from ${first.toFixed(0)} to ${last.toFixed(0)} Å` +
    (hasContinuum ? ', with the continuum as a dashed line' : '; no continuum could be set')
  return { role: 'Figure', alt, items }
}

/** The files shown side by side, behind the heading. */
function partsItem(face: Typeface, area: Area, heading: string, parts: string): Item {
  const x = area.x + face.width(heading, 8.5, 'bold') + 8
  return face.text(x, area.y + 8, parts, { size: 7, colour: PALETTE.quiet, fit: area.x + area.width - 130 - x })
}

/** True where at least two values are finite: enough for a line. */
export function isDrawable(values: ArrayLike<number>): boolean {
  let count = 0
  for (let i = 0; i < values.length && count < 2; i++) if (Number.isFinite(values[i])) count++
  return count === 2
}

/** Height of a figure that cannot be drawn: its heading and a line of words. */
export const ABSENT_HEIGHT = 24
