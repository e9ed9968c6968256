import type { SpectrumOutcome } from '../quality/types.ts'
import type { Block, Item } from './drawing.ts'
import { box } from './drawing.ts'
import type { Flow } from './flow.ts'
import { mark, STANDING_COLOURS } from './marks.ts'
import { normalisedFigure } from './normalisedFigure.ts'
import { PALETTE } from './palette.ts'
import { posteriorFigure } from './posteriorFigure.ts'
import type { Area } from './spectrumFigure.ts'
import { ABSENT_HEIGHT, figureHeading, isDrawable, spectrumFigure } from './spectrumFigure.ts'
import type { Shown } from './shownSpectrum.ts'
import { shownSpectrum } from './shownSpectrum.ts'
import type { TargetView } from './targetView.ts'
import type { Typeface } from './typeface.ts'
import type { Answer } from './verdict.ts'
import { fileName, findingsOf, verdictOf } from './verdict.ts'
import { duration, shortNumber, typeNumberOf } from './words.ts'

/** Draws page 1 of a target: verdict, spectrum, normalised spectrum, probability, what to watch. */
export function drawFirstPage(face: Typeface, flow: Flow, view: TargetView): void {
  const verdict = verdictOf(view)
  flow.area(34, (area) => [title(face, area, view)])
  const known = face.wrap(face.clean(factsText(view)), flow.width, { size: 7.5, weight: 'regular' }).slice(0, 2)
  flow.area(5 + known.length * 10, (area) => [facts(face, area, known)])
  const whole = face.wrap(face.clean(capital(verdict.sentence)), flow.width - 10, { size: 12, weight: 'bold' })
  const lines = whole.slice(0, 3)
  if (whole.length > 3) lines[2] += ' …'
  flow.area(lines.length * 15 + 8, (area) => [sentence(face, area, lines)])
  flow.area(76, (area) => answers(face, area, verdict.answers))
  const { spectrum, parts } = shownSpectrum(view)
  const room = flow.room()
  const bottom = view.type.grid ? 148 : 90
  const [first, second] = heights(spectrum, room - bottom - 24)
  flow.area(first, (area) => [spectrumFigure(face, area, spectrum, partsText(parts))])
  flow.space(12)
  flow.area(second, (area) => [normalisedFigure(face, area, spectrum, view.type)])
  flow.space(11)
  flow.area(bottom, (area) => {
    const left = { ...area, width: area.width * 0.56 }
    const right = { ...area, x: area.x + area.width * 0.6, width: area.width * 0.4 }
    return [posteriorFigure(face, left, view.type, expectedOf(view)), watch(face, right, view)]
  })
}

/** Which files stand side by side in the figures, and by what their flux was multiplied; nothing for one file. */
function partsText(parts: Shown['parts']): string {
  if (parts.length < 2) return ''
  return parts
    .map(({ exposure, factor }) => `${fileName(exposure.file)}${factor === 1 ? '' : ` × ${shortNumber(factor)}`}`)
    .join(', ')
}

/** Heights of the spectrum and of the normalised one; what cannot be drawn takes a line of words, no empty box. */
function heights({ curves }: SpectrumOutcome, room: number): readonly [number, number] {
  const [hasFlux, hasNormalised] = [curves && isDrawable(curves.flux), curves && isDrawable(curves.normalised)]
  if (hasFlux && hasNormalised) return [room * 0.38, room * 0.62]
  return [hasFlux ? room * 0.5 : ABSENT_HEIGHT, hasNormalised ? room * 0.7 : ABSENT_HEIGHT]
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

/** The expected type as the list writes it and as a number, where it is an MK type. */
export function expectedOf(view: TargetView): { readonly word: string; readonly number: number } | undefined {
  const word = view.summary?.listed?.expectedType ?? view.exposures[view.best]?.night?.expectedType
  const number = word === undefined ? undefined : typeNumberOf(word)
  return word === undefined || number === undefined ? undefined : { word, number }
}

function title(face: Typeface, area: Area, view: TargetView): Block {
  const size = 22
  const text = face.text(area.x, area.y + 24, view.name, { size, weight: 'bold', fit: area.width })
  return { role: 'H1', items: [text], bookmark: { title: text.text, level: 1, y: 0 } }
}

/** When and how the shown exposure was made, as far as the header says. */
function factsText(view: TargetView): string {
  const { facts: header, setup, resolution } = view.exposures[view.best].spectrum
  const parts = [
    view.exposures.length > 1
      ? `${view.exposures.length} exposures, here ${fileName(view.exposures[view.best].file)}`
      : '',
    header.ra === undefined || header.dec === undefined
      ? ''
      : `RA ${header.ra.toFixed(4)}°, Dec ${header.dec.toFixed(4).replace(/^-/, '−')}°`,
    header.dateObs ?? '',
    header.exposure === undefined ? '' : `${shortNumber(header.exposure)} s`,
    header.airmass === undefined ? '' : `airmass ${header.airmass.toFixed(2)}`,
    setup,
    resolution === undefined ? '' : `FWHM ${resolution.fwhm.toFixed(1)} Å`,
  ].filter((part) => part !== '')
  return parts.length ? parts.join('  ·  ') : 'the header says nothing of when and how it was observed'
}

function facts(face: Typeface, area: Area, lines: readonly string[]): Block {
  const style = { size: 7.5, colour: PALETTE.quiet, fit: area.width }
  return { role: 'P', items: lines.map((line, i) => face.text(area.x, area.y + 8 + i * 10, line, style)) }
}

function sentence(face: Typeface, area: Area, lines: readonly string[]): Block {
  const bar = box(area.x, area.y + 2, 3, lines.length * 15, PALETTE.ink)
  const texts = lines.map((line, i) =>
    face.text(area.x + 10, area.y + 13 + i * 15, line, { size: 12, weight: 'bold', fit: area.width - 10 }),
  )
  return { role: 'P', items: [bar, ...texts] }
}

function answers(face: Typeface, area: Area, given: readonly Answer[]): Block[] {
  const gap = 14
  const width = (area.width - gap * (given.length - 1)) / given.length
  return given.map((answer, i): Block => {
    const x = area.x + i * (width + gap)
    const items: Item[] = [
      box(x, area.y, width, 1.6, STANDING_COLOURS[answer.standing]),
      face.text(x, area.y + 11, answer.question, { size: 7, colour: PALETTE.quiet, fit: width }),
      mark(x + 4.5, area.y + 21.5, 4, answer.standing),
      face.text(x + 14, area.y + 26, answer.answer, { size: 12.5, weight: 'bold', fit: width - 14 }),
    ]
    const lines = answer.details.flatMap((detail) =>
      face.wrap(face.clean(detail), width, { size: 7.5, weight: 'regular' }),
    )
    lines.slice(0, 4).forEach((line, k) => {
      const isCut = k === 3 && lines.length > 4
      items.push(face.text(x, area.y + 37 + k * 9.6, isCut ? `${line} …` : line, { size: 7.5, fit: width }))
    })
    return { role: 'P', items }
  })
}

/** How the file was read: told on page 2, nothing to watch. */
const HOUSEKEEPING: ReadonlySet<string> = new Set(['medium-declared', 'noise-not-in-file', 'velocity-frame', 'joined'])

/** What to watch: doubts and faults in plain words, then notes, as many as there is room for. */
function watch(face: Typeface, area: Area, view: TargetView): Block {
  const items: Item[] = [figureHeading(face, area, 'What to watch')]
  const findings = findingsOf(view).filter(({ code }) => !HOUSEKEEPING.has(code))
  const size = 7.5
  const bottom = area.y + area.height - 10
  let y = area.y + 22
  if (view.summary?.observeAgain) {
    const { exposureNeeded } = view.summary
    const needs = exposureNeeded === undefined ? '' : ` (needs ${duration(exposureNeeded)})`
    const text = `Observe again: ${view.summary.reason ?? 'no reason given'}${needs}`
    for (const line of face.wrap(face.clean(text), area.width, { size, weight: 'bold' })) {
      items.push(face.text(area.x, y, line, { size, weight: 'bold' }))
      y += 9.6
    }
    y += 3
  }
  if (findings.length === 0)
    items.push(face.text(area.x, y, 'nothing was found against it', { size, colour: PALETTE.quiet }))
  for (let i = 0; i < findings.length; i++) {
    const lines = face.wrap(face.clean(findings[i].text), area.width - 11, { size, weight: 'regular' })
    const isLast = i === findings.length - 1
    if (y + (lines.length - 1) * 9.6 > bottom - (isLast ? 0 : 10)) {
      const more = `… and ${findings.length - i} more, see the findings`
      items.push(face.text(area.x + 11, y, more, { size, colour: PALETTE.quiet }))
      break
    }
    const standing = findings[i].level === 'fault' ? 'bad' : findings[i].level === 'doubt' ? 'doubt' : 'unknown'
    items.push(mark(area.x + 3, y - 2.7, 2.6, standing))
    lines.forEach((line, k) => items.push(face.text(area.x + 11, y + k * 9.6, line, { size })))
    y += lines.length * 9.6 + 3
  }
  return { role: 'P', items }
}
